"""Pieces of one line made one: walls drawn in many strokes, twice, or overlapping.

Pieces of one kind that lie on one line and touch or overlap become one piece from the first end to the last; both ends
are ends that were drawn. What is off the line by more than a micrometre stays as it is: noding takes care of that.
Sorting only: O(n log n).
"""

import numpy as np

from kernelscan.reading.segments import Segments

__all__ = ["merged"]

SAME_ANGLE = 1e-7
SAME_LINE = 1e-6


def merged(lines: Segments) -> Segments:
    """Return the lines with pieces that continue or cover each other made one."""
    if len(lines) < 2:
        return lines
    angle = np.arctan2(*(lines.b - lines.a).T[::-1]) % np.pi
    angle = np.where(angle > np.pi - SAME_ANGLE, angle - np.pi, angle)
    order = np.lexsort((angle, lines.code))
    run = np.empty(len(lines), dtype=np.int64)
    run[order] = _numbers(angle[order], lines.code[order], SAME_ANGLE)
    first = np.full(run.max() + 1, len(lines))
    first[run[order][::-1]] = order[::-1]
    along = np.column_stack((np.cos(angle[first]), np.sin(angle[first])))[run]
    offset = ((lines.a + lines.b) / 2 * along[:, ::-1] * (-1, 1)).sum(axis=1)
    order = np.lexsort((offset, run))
    row = np.empty(len(lines), dtype=np.int64)
    row[order] = _numbers(offset[order], run[order], SAME_LINE)
    return _joined_rows(lines, row, along)


def _numbers(values: np.ndarray, groups: np.ndarray, tolerance: float) -> np.ndarray:
    """Number sorted values: a new number wherever the group changes or the next value is farther off."""
    return np.concatenate(([0], np.cumsum((np.diff(values) > tolerance) | (np.diff(groups) != 0))))


def _joined_rows(lines: Segments, row: np.ndarray, along: np.ndarray) -> Segments:
    ends = np.stack((lines.a, lines.b))
    places = (ends * along).sum(axis=2)
    turned = (places[0] > places[1]).astype(np.int64)
    index = np.arange(len(lines))
    low, high = places[turned, index], places[1 - turned, index]
    order = np.lexsort((low, row))
    base = row[order] * (2.0 * (high.max() - low.min()) + 1.0)
    reach = np.maximum.accumulate(high[order] + base)
    starts = np.concatenate(([True], low[order][1:] + base[1:] > reach[:-1] + SAME_LINE))
    piece = np.cumsum(starts) - 1
    head = order[starts]
    by_end = np.lexsort((high[order], piece))
    tail = order[by_end[np.flatnonzero(np.diff(piece[by_end], append=piece[-1] + 1))]]
    return Segments(
        ends[turned[head], head], ends[1 - turned[tail], tail], lines.code[head], lines.stroke[head]
    )
