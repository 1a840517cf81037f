"""Pieces of one line made one, and nothing else touched."""

from math import cos, radians, sin

import numpy as np
import pytest

from kernelscan.reading.merging import merged
from kernelscan.reading.segments import DOOR, WALL, Segments


def lines_of(*pieces: tuple[float, float, float, float], code: int = WALL) -> Segments:
    table = np.array(pieces, dtype=float).reshape(-1, 4)
    return Segments(table[:, :2], table[:, 2:], np.full(len(table), code), np.arange(len(table)))


def ends_of(lines: Segments) -> set[tuple[tuple[float, ...], tuple[float, ...]]]:
    return {
        tuple(sorted((tuple(a), tuple(b)))) for a, b in zip(lines.a.tolist(), lines.b.tolist(), strict=True)
    }  # type: ignore[misc]


@pytest.mark.parametrize("degrees", [0, 17.3, 45, 90, 135, 179.99, 180, 201.7, 270])
def test_pieces_copies_and_overlaps(degrees: float) -> None:
    c, s = cos(radians(degrees)), sin(radians(degrees))
    spans = [(0, 1), (1, 2.5), (4, 2.2), (0.5, 0.7), (0, 4), (5, 6), (6, 5)]
    got = merged(lines_of(*[(c * p, s * p, c * q, s * q) for p, q in spans]))
    lengths = sorted(np.hypot(*(got.b - got.a).T).tolist())
    assert lengths == pytest.approx([1, 4])


def test_parallel_lines_corners_and_kinds_stay_apart() -> None:
    lines = lines_of((0, 0, 4, 0), (0, 0.001, 4, 0.001), (4, 0, 4, 3), (4, 0, 8, 0.01))
    assert ends_of(merged(lines)) == ends_of(lines)
    both = Segments(
        np.array([[0.0, 0], [1, 0]]), np.array([[1.0, 0], [2, 0]]), np.array([WALL, DOOR]), np.array([0, 1])
    )
    assert len(merged(both)) == 2


def test_ends_are_ends_that_were_drawn() -> None:
    got = merged(lines_of((0.1, 0.3, 1.7, 0.3), (1.7, 0.3, 2.9, 0.3), (2.9, 0.3, 3.3, 0.3)))
    assert ends_of(got) == {((0.1, 0.3), (3.3, 0.3))}


def test_none_and_one() -> None:
    assert len(merged(lines_of())) == 0
    assert len(merged(lines_of((0, 0, 1, 1)))) == 1
