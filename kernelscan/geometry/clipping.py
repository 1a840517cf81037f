"""A convex region cut down half-plane by half-plane, exactly: the solver for few half-planes.

Problem
    The intersection of closed half-planes, bounded or not: its kind, its sides in order, and for an empty one two or
    three half-planes that already exclude each other.
Method
    The region is kept as the cyclic list of its lines; corner k is where line k - 1 meets line k. It starts as the
    wedge of two lines that are not parallel, closed by the line at infinity, so that unbounded regions need no
    special care: a corner at infinity is a direction. A further half-plane is asked about every corner. If it
    holds them all it changes nothing. If it holds some strictly inside, these are consecutive; they stay, and the
    new line joins the two sides on which they end. If it holds none strictly inside, the region is now a segment
    (or ray), a point or empty, and goes on as such.
Exactness
    Corners are named by their lines and never computed from one another. A sign is first tried in doubles, with
    coordinates from a local origin in which every border point is at most M from 0. A line is scaled so that
    |u| + |v| = 1, hence |w| <= M. With unit roundoff e = 2**-53: a local coordinate, a component of a way and its
    scaled form carry relative errors of at most 1, 1 and 4 e; w errs by at most 8 e M; a corner's X and Y, at most
    2 M each, by at most 26 e M; its W, at most 2 (1 for unit lines), by at most 10 e; so the value
    u X + v Y + w W errs by less than 64 e M. Signs beyond that bound are right; others are found in integers.
    Underflow adds at most a few times 2**-1074, and where M > 2**1000 nothing is believed.
Degenerate cases
    A region with an interior keeps sides of positive length only, so walls that touch it in a point or run along a
    side that is already there are left out. Once thin, it keeps the lines that prove it: their intersection is the
    region.
Cost
    O(n k) for n half-planes and at most k corners at a time; about a microsecond for each that changes nothing.
Letters
    u, v, w a line; x, y, z a corner's triple (X, Y, W); i a half-plane's number, -1 the line at infinity.
"""

from collections.abc import Iterable
from math import inf
from typing import Literal

import numpy as np
import numpy.typing as npt

from kernelscan.geometry.predicates import (
    AT_INFINITY,
    Line,
    Row,
    Triple,
    exact_line,
    first_conflict,
    meet,
    sign,
    turn,
    value,
)

__all__ = ["ConvexRegion", "Shape", "region_of"]

Shape = Literal["area", "segment", "point", "empty"]
Floats = tuple[float, float, float]
Place = tuple[float, float]
Rows = dict[int, Row]

UNIT = 2.0**-53
FILTER = 64 * UNIT
TINY = 2.0**-1060
INFINITE = -1


class ConvexRegion:
    """The intersection of the half-planes so far; ``shape`` says what it is.

    Parameters
    ----------
    rows
        The half-planes by number; more of them may be added while the region lives.
    first, second
        The numbers of two rows, the second turning left from the first.
    origin
        The local origin for the filter.
    reach
        A bound M on the coordinates of all the rows' border points, as seen from the origin; see :meth:`reach_to`.
    """

    __slots__ = (
        "bound",
        "conflict",
        "corners",
        "exact",
        "lines",
        "names",
        "origin",
        "proof",
        "reach",
        "rows",
        "shape",
    )

    def __init__(self, rows: Rows, first: int, second: int, origin: Place, reach: float) -> None:
        self.rows, self.origin, self.reach, self.bound = rows, origin, 0.0, 0.0
        self.reach_to(reach)
        self.exact: dict[int, Line] = {INFINITE: AT_INFINITY}
        self.shape: Shape = "area"
        self.names = [first, second, INFINITE]
        self.lines = [self._float_line(first), self._float_line(second), (0.0, 0.0, reach)]
        self.corners = [_cross(self.lines[k - 1], self.lines[k]) for k in range(3)]
        self.proof: tuple[int, ...] = ()
        self.conflict: tuple[int, ...] = ()

    def reach_to(self, reach: float) -> None:
        """Let the filter allow for border points up to a distance from the origin, before such are added."""
        self.reach = max(self.reach, reach)
        self.bound = FILTER * self.reach + TINY if self.reach <= 2.0**1000 else inf

    def cut_by_rows(self, numbers: npt.NDArray[np.int64], rows: npt.NDArray[np.float64]) -> None:
        """Add half-planes, ``(m, 6)``, and cut by them in turn."""
        names, table, (ox, oy) = numbers.tolist(), rows.tolist(), self.origin
        self.rows.update(zip(names, table, strict=True))
        self.reach_to(max([max(abs(row[0] - ox), abs(row[1] - oy)) for row in table], default=0.0))
        self.cut_by_all(names)

    def cut_by_all(self, numbers: Iterable[int]) -> None:
        """Cut by the half-planes in turn, and stop as soon as nothing is left."""
        rows, (ox, oy) = self.rows, self.origin
        for i in numbers:
            px, py, tx, ty, hx, hy = rows[i]
            u, v = ty - hy, hx - tx
            scale = abs(u) + abs(v)
            u, v = u / scale, v / scale
            w = u * (ox - px) + v * (oy - py)
            values = [u * x + v * y + w * z for x, y, z in self.corners]
            if min(values) > self.bound:
                continue
            self._cut(i, (u, v, w), self._signs(i, values))
            if self.shape == "empty":
                return

    def _cut(self, i: int, line: Floats, signs: list[int]) -> None:
        if min(signs) >= 0:
            return
        if self.shape == "area":
            self._cut_area(i, line, signs)
        elif self.shape == "segment":
            self._cut_segment(i, *signs)
        else:
            self._empty((*self.proof, i))

    @property
    def is_bounded(self) -> bool:
        """Whether no corner is at infinity."""
        return not self.infinite_corners()

    def infinite_corners(self) -> list[int]:
        """Return which corners are at infinity: those on the line there, and where two antiparallel sides meet."""
        names = self.corner_names()
        return [k for k, (_, _, z) in enumerate(self.corners) if z < FILTER and self._is_infinite(names[k])]

    def _is_infinite(self, name: tuple[int, int]) -> bool:
        return INFINITE in name or turn(self.exact_line(name[0]), self.exact_line(name[1])) == 0

    def corner_names(self) -> list[tuple[int, int]]:
        """Return the two lines of each corner; the only names of a thin region."""
        if self.shape == "area":
            return [(self.names[k - 1], self.names[k]) for k in range(len(self.names))]
        if self.shape == "segment":
            before, carrier, after = self.names
            return [(before, carrier), (carrier, after)]
        return [(self.names[0], self.names[1])]

    def exact_corners(self) -> list[Triple]:
        """Return the corners in order; those at infinity have W = 0."""
        return [self.exact_corner(name) for name in self.corner_names()] if self.shape != "empty" else []

    def exact_corner(self, name: tuple[int, int]) -> Triple:
        """Return where two lines meet."""
        return meet(self.exact_line(name[0]), self.exact_line(name[1]))

    def exact_line(self, i: int) -> Line:
        """Return the integers of line i."""
        line = self.exact.get(i)
        if line is None:
            line = self.exact[i] = exact_line(self.rows[i])
        return line

    def _float_line(self, i: int) -> Floats:
        px, py, tx, ty, hx, hy = self.rows[i]
        u, v = ty - hy, hx - tx
        scale = abs(u) + abs(v)
        u, v = u / scale, v / scale
        return u, v, u * (self.origin[0] - px) + v * (self.origin[1] - py)

    def _signs(self, i: int, values: list[float]) -> list[int]:
        bound = self.bound
        signs = [(s > bound) - (s < -bound) for s in values]
        if 0 in signs:
            names, line = self.corner_names(), self.exact_line(i)
            return [
                s or sign(value(line, self.exact_corner(name))) for s, name in zip(signs, names, strict=True)
            ]
        return signs

    def _cut_area(self, i: int, line: Floats, signs: list[int]) -> None:
        if max(signs) <= 0:
            self._collapse(i, signs)
            return
        inside = [s > 0 for s in signs]
        first = len(signs) - inside[::-1].index(False) if inside[0] and inside[-1] else inside.index(True)
        names, lines, corners = self.names * 2, self.lines * 2, self.corners * 2
        end = (inside * 2).index(False, first)
        self.names = [names[first - 1], *names[first:end], i]
        self.corners = [_cross(line, lines[first - 1]), *corners[first:end], _cross(lines[end - 1], line)]
        self.lines = [lines[first - 1], *lines[first:end], line]

    def _collapse(self, i: int, signs: list[int]) -> None:
        """No corner is strictly inside: what is left is where the border touches the region."""
        count, names = len(signs), self.names
        infinite = self.infinite_corners()
        touched = [k for k in range(count) if signs[k] == 0]
        finite = [k for k in touched if k not in infinite]
        if not finite:
            self._empty(self._opponents(i))
        elif len(touched) == 1:
            k = finite[0]
            self._become_point((names[k - 1], names[k]), (names[k - 1], names[k], i))
        else:
            k = touched[0] if (touched[0] + 1) % count == touched[1] else touched[1]
            after = (k + 1) % count
            ends = (
                INFINITE if k in infinite else names[k - 1],
                INFINITE if after in infinite else names[after],
            )
            self._become_segment(ends[0], names[k], ends[1], (names[k], i))

    def _opponents(self, i: int) -> tuple[int, ...]:
        """The lines of the region among which are those that exclude i: the ones at the corner nearest to it."""
        u, v, _ = self.exact_line(i)
        opposite = (-u, -v, 0)
        for g, h in self.corner_names():
            if (
                not self._is_infinite((g, h))
                and turn(self.exact_line(g), opposite) >= 0
                and turn(opposite, self.exact_line(h)) >= 0
            ):
                return g, h, i
        return (*(name for name in self.names if name != INFINITE), i)

    def _become_segment(self, before: int, carrier: int, after: int, carriers: tuple[int, int]) -> None:
        self.shape, self.names = "segment", [before, carrier, after]
        self.proof = tuple(dict.fromkeys(n for n in (*carriers, before, after) if n != INFINITE))
        lines = [(0.0, 0.0, self.reach) if n == INFINITE else self._float_line(n) for n in self.names]
        self.corners = [_cross(lines[0], lines[1]), _cross(lines[1], lines[2])]

    def _become_point(self, name: tuple[int, int], proof: tuple[int, ...]) -> None:
        self.shape, self.names, self.proof = "point", list(name), tuple(dict.fromkeys(proof))
        self.corners = [_cross(self._float_line(name[0]), self._float_line(name[1]))]

    def _cut_segment(self, i: int, start: int, end: int) -> None:
        before, carrier, after = self.names
        carriers = (self.proof[0], self.proof[1])
        if start > 0:
            self._become_segment(before, carrier, i, carriers)
        elif end > 0:
            self._become_segment(i, carrier, after, carriers)
        elif start == 0 and before != INFINITE:
            self._become_point((before, carrier), (*carriers, before, i))
        elif end == 0 and after != INFINITE:
            self._become_point((carrier, after), (*carriers, after, i))
        else:
            self._empty((*self.proof, i))

    def _empty(self, suspects: tuple[int, ...]) -> None:
        """Nothing is left: find the two or three of the suspects that exclude each other."""
        names = tuple(dict.fromkeys(suspects))
        places = first_conflict([self.exact_line(name) for name in names])
        assert places is not None  # by Helly's theorem
        self.shape, self.names, self.corners = "empty", [], []
        self.proof = self.conflict = tuple(names[k] for k in places)


def _cross(g: Floats, h: Floats) -> Floats:
    return g[1] * h[2] - h[1] * g[2], g[2] * h[0] - h[2] * g[0], g[0] * h[1] - h[0] * g[1]


def region_of(rows: Rows) -> ConvexRegion | None:
    """Return the intersection of half-planes, given by number; None if all of them are parallel."""
    pair = _starting_pair(rows)
    if pair is None:
        return None
    region = ConvexRegion(rows, *pair, *_surroundings(rows))
    region.cut_by_all(i for i in rows if i not in pair)
    return region


def _surroundings(rows: Rows) -> tuple[Place, float]:
    xs, ys = [row[0] for row in rows.values()], [row[1] for row in rows.values()]
    ox, oy = xs[0], ys[0]
    return (ox, oy), max(max(xs) - ox, ox - min(xs), max(ys) - oy, oy - min(ys))


def _starting_pair(rows: Rows) -> tuple[int, int] | None:
    """Return the first row and the first that is not parallel to it, the second turning left from the first."""
    first, *others = rows
    base = exact_line(rows[first])
    for i in others:
        way = turn(base, exact_line(rows[i]))
        if way:
            return (first, i) if way > 0 else (i, first)
    return None
