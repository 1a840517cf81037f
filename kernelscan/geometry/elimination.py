"""The sides of an intersection of very many half-planes, by dropping locally what is not needed.

Problem
    Of many half-planes, more than are worth cutting by one at a time, find those that bound the intersection, in
    order; or two or three that exclude each other; or, if the intersection is thin, three that show it.
Method
    The half-planes are sorted by way around the full turn; of several in the same way the tightest stays. Let f, i, r
    be neighbours with turns f -> i and i -> r of less than half a turn, and s the value of i, scaled, at the meeting
    of f and r. While s < 0, i has a side of positive length between the other two. Where s >= 0,
      - if r turns left from f by less than half a turn, i holds all that f and r have in common and is dropped;
      - else the three have no common point if s > 0, and at most thin ones if s = 0.
    When nothing is left to drop and no such three are met, the sides of positive length turn left all the way around:
    a convex polygon, the intersection. Each drop is implied by two that stay, so order does not matter, and
    many can be dropped at once as long as no two of them are neighbours.
Exactness
    With border points a and ways d,
        s = (d_f x d_r) (d_i x (a_f - a_i)) + (d_i x d_f) ((a_r - a_f) x d_r).
    All differences are of the given doubles, so neighbouring walls lose nothing to a far origin or to being short.
    With e = 2**-53 a cross product of rounded differences errs by less than E = 6 e (|x y| + |x' y'|), and s by less
    than the products of each factor's size with the other's E, plus E E, plus 4 e times the two terms. Signs within
    twice that bound are settled in integers.
Degenerate cases
    Ways are sorted by dy / (|dx| + |dy|), off by at most 8 e; stretches closer than 32 e are sorted exactly. Borders
    along the axes, of which rooms of right angles have very many, are first thinned to one for each way by comparing
    coordinates. An unbounded intersection leaves one gap of half a turn or more, next to which nothing is dropped.
Cost
    O(n log n) for the sort; each round of drops costs what has changed since the last.
Letters
    f, i, r neighbours; a a border point; d a way.
Source
    The dual of convex hulls by local convexity (Graham 1972), around the full turn instead of chain by chain.
"""

from collections.abc import Iterable
from functools import cmp_to_key
from typing import NamedTuple

import numpy as np
import numpy.typing as npt

from kernelscan.geometry.predicates import Line, exact_line, meet, same_way, sign, turn, value

__all__ = ["Sides", "angle_keys", "sides_of"]

Floats = npt.NDArray[np.float64]
Indices = npt.NDArray[np.int64]
Signs = npt.NDArray[np.int8]

UNIT = 2.0**-53
TINY = 2.0**-1000
FEW = 256


class Sides(NamedTuple):
    """What is left: the sides in order, or who excludes each other, or who shows that the intersection is thin."""

    order: Indices
    conflict: tuple[int, ...] = ()
    thin: tuple[int, ...] = ()
    is_bounded: bool = True
    is_strip: bool = False


def sides_of(rows: Floats) -> Sides:
    """Return the sides of the intersection of half-planes, given as ``(m, 6)`` rows, by their row numbers."""
    with np.errstate(over="ignore", invalid="ignore", under="ignore"):
        return _Elimination(rows).run()


class _Elimination:
    """A ring of half-planes, linked both ways, from which some are dropped."""

    def __init__(self, rows: Floats) -> None:
        self.rows = rows
        self.a, self.d = rows[:, :2], rows[:, 4:] - rows[:, 2:4]
        self.lines: dict[int, Line] = {}
        order = self._sorted_by_way(_tightest_along_axes(self.a, self.d))
        self.order, self.alive = order, np.ones(len(order), dtype=bool)
        self.after = np.roll(np.arange(len(order)), -1)
        self.before = np.roll(np.arange(len(order)), 1)
        self.gap = self._turns(order, np.roll(order, -1)) <= 0
        self.rank = np.full(len(order), -1)
        self.priority = np.random.default_rng(1).permutation(len(order))

    def run(self) -> Sides:
        """Drop until nothing changes."""
        touched = np.arange(len(self.order))
        while len(touched):
            useless, verdict = self._judged(touched)
            if verdict is not None:
                return verdict
            touched = self._dropped(touched[useless])
        return self._result()

    def _result(self) -> Sides:
        places = np.flatnonzero(self.alive)
        gaps = np.flatnonzero(self.gap[places])
        if not len(gaps):
            return Sides(self.order[places])
        order = np.roll(self.order[places], -int(gaps[0]) - 1)
        first, last = int(order[0]), int(order[-1])
        g, h = self._line(first), self._line(last)
        opposed = turn(g, h) == 0 and not same_way(g, h)
        between = value(h, _point_on(g)) if opposed else 1
        if between < 0:
            return Sides(order[:0], conflict=(first, last))
        thin = (first, last) if between == 0 else ()
        return Sides(order, thin=thin, is_bounded=False, is_strip=opposed and len(order) == 2)

    def _judged(self, places: Indices) -> tuple[npt.NDArray[np.bool_], Sides | None]:
        """Return which of the places can be dropped, or what the search ends with."""
        before, after = self.before[places], self.after[places]
        f, i, r = self.order[before], self.order[places], self.order[after]
        open_ = self.gap[before] | self.gap[places]
        s = self._values(f, i, r)
        closed = np.flatnonzero((s >= 0) & ~open_)
        w = np.zeros(len(places), dtype=np.int8)
        w[closed] = self._turns(f[closed], r[closed])
        useless = np.zeros(len(places), dtype=bool)
        useless[closed] = w[closed] > 0
        ends = closed[w[closed] <= 0]
        if len(ends):
            against = ends[s[ends] > 0]
            k = int(against[0] if len(against) else ends[0])
            three = (int(f[k]), int(i[k]), int(r[k]))
            if s[k] > 0:
                return useless, Sides(i[:0], conflict=(three[0], three[2]) if w[k] == 0 else three)
            return useless, Sides(i[:0], thin=three)
        return useless, None

    def _dropped(self, useless: Indices) -> Indices:
        """Drop those of the useless places of which no neighbour is dropped too; return whose neighbours changed."""
        if not len(useless):
            return useless
        self.rank[useless] = self.priority[useless]
        before, after = self.before[useless], self.after[useless]
        going = (self.rank[useless] > self.rank[before]) & (self.rank[useless] > self.rank[after])
        self.rank[useless] = -1
        gone, before, after = useless[going], before[going], after[going]
        self.alive[gone] = False
        self.after[before], self.before[after] = after, before
        touched = np.concatenate([before, after, useless[~going]])
        if len(touched) < FEW:
            return np.unique(touched)
        marked = np.zeros(len(self.order), dtype=bool)
        marked[touched] = True
        return np.flatnonzero(marked)

    def _line(self, number: int) -> Line:
        line = self.lines.get(number)
        if line is None:
            line = self.lines[number] = exact_line(self.rows[number].tolist())
        return line

    def _turns(self, g: Indices, h: Indices) -> Signs:
        """Return the signs of d_g x d_h."""
        size, error = _cross(self.d[g], self.d[h])
        signs = _sure_signs(size, error)
        for k in np.flatnonzero(signs == 0).tolist():
            signs[k] = sign(turn(self._line(int(g[k])), self._line(int(h[k]))))
        return signs

    def _values(self, f: Indices, i: Indices, r: Indices) -> Signs:
        """Return the signs of s."""
        w, w_error = _cross(self.d[f], self.d[r])
        p, p_error = _cross(self.d[i], self.a[f] - self.a[i])
        v, v_error = _cross(self.d[i], self.d[f])
        q, q_error = _cross(self.a[r] - self.a[f], self.d[r])
        error = _product_error(w, w_error, p, p_error) + _product_error(v, v_error, q, q_error)
        signs = _sure_signs(w * p + v * q, error)
        for k in np.flatnonzero(signs == 0).tolist():
            before, line, after = (self._line(int(place[k])) for place in (f, i, r))
            signs[k] = sign(value(line, meet(before, after)))
        return signs

    def _sorted_by_way(self, numbers: Indices) -> Indices:
        """Sort by way, exactly, and keep the tightest of each way."""
        keys = angle_keys(self.d[numbers])
        if not np.isfinite(keys).all():
            return self._exactly_sorted(numbers.tolist())
        order = numbers[np.argsort(keys, kind="stable")]
        keys = np.sort(keys)
        close = np.diff(keys) <= 32 * UNIT
        if not close.any():
            return order
        doubtful = np.flatnonzero(close)
        doubtful = doubtful[self._unsure(order[doubtful], order[doubtful + 1])]
        if not len(doubtful):
            return order
        starts = np.flatnonzero(np.concatenate([[True], ~close]))
        stretch = np.unique(np.searchsorted(starts, doubtful, side="right") - 1)
        bounds = np.append(starts, len(order))
        pieces: list[Indices] = []
        done = 0
        for begin, end in zip(bounds[stretch].tolist(), bounds[stretch + 1].tolist(), strict=True):
            pieces += [order[done:begin], self._exactly_sorted(order[begin:end].tolist())]
            done = end
        return np.concatenate([*pieces, order[done:]])

    def _unsure(self, g: Indices, h: Indices) -> npt.NDArray[np.bool_]:
        size, error = _cross(self.d[g], self.d[h])
        return ~(size > 2 * error + TINY)

    def _exactly_sorted(self, numbers: Iterable[int]) -> Indices:
        kept: list[int] = []

        def compare(g: int, h: int) -> int:
            return _order(self._line(g), self._line(h))

        for number in sorted(numbers, key=cmp_to_key(compare)):
            if not kept or not same_way(self._line(kept[-1]), self._line(number)):
                kept.append(number)
            elif value(self._line(kept[-1]), _point_on(self._line(number))) > 0:
                kept[-1] = number
        return np.array(kept, dtype=np.int64)


def _order(g: Line, h: Line) -> int:
    """Compare two ways around the full turn from straight down."""
    return _quarter(g) - _quarter(h) or -sign(turn(g, h))


def _quarter(g: Line) -> int:
    """Return 0 straight down, 1 to the right, 2 straight up, 3 to the left."""
    u, v, _ = g
    return 1 if v > 0 else 3 if v < 0 else 0 if u > 0 else 2


def _point_on(g: Line) -> tuple[int, int, int]:
    """Return a point of a line: the one nearest to the origin."""
    u, v, w = g
    return -u * w, -v * w, u * u + v * v


def _tightest_along_axes(a: Floats, d: Floats) -> Indices:
    """Return the numbers of all half-planes but those along an axis that another of the same way makes superfluous."""
    keep = (d != 0).all(axis=1)
    if keep.all():
        return np.arange(len(d))
    numbers = [np.flatnonzero(keep)]
    for axis, way, best in ((1, 1, np.argmax), (1, -1, np.argmin), (0, 1, np.argmin), (0, -1, np.argmax)):
        these = np.flatnonzero((d[:, axis] == 0) & (np.sign(d[:, 1 - axis]) == way))
        if len(these):
            numbers.append(these[[best(a[these, axis])]])
    return np.concatenate(numbers)


def angle_keys(d: Floats) -> Floats:
    """Return numbers that grow with the way from straight down, once around to it."""
    t = d[:, 1] / (np.abs(d[:, 0]) + np.abs(d[:, 1]))
    keys: Floats = np.where(d[:, 0] >= 0, t, 2 - t)
    return keys


def _cross(d: Floats, e: Floats) -> tuple[Floats, Floats]:
    """Return d x e of rounded differences, and a bound on its error."""
    left, right = d[:, 0] * e[:, 1], d[:, 1] * e[:, 0]
    return left - right, 6 * UNIT * (np.abs(left) + np.abs(right))


def _product_error(x: Floats, x_error: Floats, y: Floats, y_error: Floats) -> Floats:
    x, y = np.abs(x), np.abs(y)
    return x * y_error + y * x_error + x_error * y_error + 4 * UNIT * x * y


def _sure_signs(size: Floats, error: Floats) -> Signs:
    """Return the signs of numbers, 0 where the error may hide it."""
    bound = 2 * error + TINY
    return (size > bound).astype(np.int8) - (size < -bound).astype(np.int8)
