"""Which of many edges is nearest to an eye, in each of the sectors between neighbouring directions.

Problem
    Around an eye lie edges that do not cross each other, each running counter-clockwise over some sectors. Find for
    every sector the edge that a ray from the eye meets first.
Method
    Blocks of 2**k consecutive sectors form a table with a row for each k. An edge over m sectors is the union of two
    blocks of the row floor(log2 m); each block keeps the nearest edge painted on it. From the top row down, a
    block hands its edge to its two halves, and the last row is the answer. Within a block the edges are
    ordered one behind the other, so that a comparison along any ray inside it will do.

    The line of an edge is w . x = 1, x from the eye; along a unit vector u its distance is 1 / (w . u). Hence the
    nearest edge has the largest w . u, which is what is compared, with a bound on its error. Below that
    bound the ends of the two edges are compared by exact orientation.
Cost
    O((n + k) log k) for n edges and k sectors, in 2 log k array passes over those blocks that hold an edge.
Degenerate cases
    Edges may share ends or touch. Sectors that no edge covers get -1.
Letters
    p -> q an edge; c the eye; d = q - p; w the dual vector of an edge; u a direction; row k, block of 2**k sectors.
"""

from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from kernelscan.geometry.signs import ROUNDOFF, SMALLEST, orientations

__all__ = ["nearest_edges"]

Floats = npt.NDArray[np.float64]
Indices = npt.NDArray[np.intp]
Headings = npt.NDArray[np.complex128]


def nearest_edges(c: Floats, p: Floats, q: Floats, start: Indices, stop: Indices, unit: Floats) -> Indices:
    """Return for each sector the number of the edge nearest to the eye, or -1.

    Parameters
    ----------
    c
        The eye, ``(2,)``.
    p, q
        ``(n, 2)`` ends of the edges, each with the eye strictly on its left.
    start, stop
        ``(n,)`` numbers of the directions in which the ends are seen.
    unit
        ``(k, 2)`` directions in counter-clockwise order, as unit vectors; sector i lies between i and the next.
    """
    count = len(unit)
    length = (stop - start) % count
    row = np.frexp(length)[1].astype(np.intp) - 1
    heading = unit.view(np.complex128)[:, 0]
    field = _Field(c, p, q, heading, _bisectors(heading), *_duals(c, p, q))
    table = np.full((int(row.max()) + 1, count), -1, dtype=np.intp)
    edges = np.arange(len(p))
    with np.errstate(all="ignore"):
        for first in (start, (stop - (1 << row)) % count):
            field.paint(table, row, first, edges)
        for k in range(len(table) - 1, 0, -1):
            field.hand_down(table[k], table[k - 1], k - 1)
    return np.asarray(table[0])


def _bisectors(heading: Headings) -> Headings:
    """Return a vector along the middle of each sector, of a length between 1 and 3; sectors are narrower than pi."""
    following = np.roll(heading, -1)
    return heading + following - 1j * (following - heading)


def _duals(c: Floats, p: Floats, q: Floats) -> tuple[Headings, Floats]:
    """Return each edge's w and a bound on the error of w . u, for any u of a length up to 3 that is rounded itself."""
    with np.errstate(all="ignore"):
        v, d = p - c, q - p
        left, right = v[:, 0] * d[:, 1], v[:, 1] * d[:, 0]
        height, error = left - right, 8 * ROUNDOFF * (np.abs(left) + np.abs(right)) + SMALLEST
        w = -1j * d.view(np.complex128)[:, 0] / height
        slack = np.where(height > 2 * error, error / (height - error), np.inf) + 64 * ROUNDOFF
        return w, 4 * np.abs(w) * slack


@dataclass(frozen=True, slots=True, eq=False)
class _Field:
    """The edges around one eye, ready for comparison; directions and duals are complex numbers, x + iy."""

    eye: Floats
    p: Floats
    q: Floats
    heading: Headings
    middle: Headings
    dual: Headings
    error: Floats

    def hand_down(self, upper: Indices, lower: Indices, row: int) -> None:
        """Paint what each block of a row holds on its two halves in the row below, number ``row``."""
        first = np.flatnonzero(upper >= 0)
        edges = upper[first]
        inside = np.roll(self.heading, -(1 << row >> 1)) if row else self.middle
        for half in (first, (first + (1 << row)) % len(upper)):
            lower[half] = self._nearer(edges, lower[half], inside[half])

    def paint(self, table: Indices, row: Indices, first: Indices, edges: Indices) -> None:
        """Paint each edge on its block, ``table[row, first]``; several may fall on one."""
        while len(first):
            u = np.where(
                row > 0, self.heading[(first + (1 << row >> 1)) % len(self.heading)], self.middle[first]
            )
            edges = self._nearer(edges, table[row, first], u)
            table[row, first] = edges
            lost = np.flatnonzero(table[row, first] != edges)
            # of those that fell on one block, the nearest is written last, so that two rounds are enough
            lost = lost[np.argsort((self.dual[edges[lost]] * u[lost].conj()).real)]
            row, first, edges = row[lost], first[lost], edges[lost]

    def _nearer(self, edges: Indices, held: Indices, u: Headings) -> Indices:
        """Return for each block whichever edge is met first along a direction u inside both; held may be -1."""
        rivals = np.flatnonzero((held >= 0) & (held != edges))
        if not len(rivals):
            return edges
        e, f, u = edges[rivals], held[rivals], u[rivals]
        lead = ((self.dual[e] - self.dual[f]) * u.conj()).real
        ahead = lead > 0
        doubtful = np.flatnonzero(~(np.abs(lead) > self.error[e] + self.error[f]))
        if len(doubtful):
            ahead[doubtful] = self._ahead(e[doubtful], f[doubtful])
        nearer = edges.copy()
        nearer[rivals] = np.where(ahead, e, f)
        return nearer

    def _ahead(self, e: Indices, f: Indices) -> npt.NDArray[np.bool_]:
        """Whether e is in front of f, both seen in some common direction and not crossing; exact."""
        verdict = np.zeros(len(e), dtype=np.int8)
        for end in (self.p, self.q):
            for near, far, sign in ((e, f, 1), (f, e, -1)):
                # an end of far, seen within near and off its line, tells which is behind
                facing = self._within(near, end[far])
                side = orientations(self.p[near], self.q[near], end[far])
                verdict = np.where((verdict == 0) & facing, -sign * side, verdict)
        return np.asarray(verdict > 0)

    def _within(self, e: Indices, points: Floats) -> npt.NDArray[np.bool_]:
        past_start = orientations(self.eye, self.p[e], points) >= 0
        return np.asarray(past_start & (orientations(self.eye, points, self.q[e]) >= 0))
