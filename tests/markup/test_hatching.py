"""Hatch lines: exact on rectangles, whole over neighbours, indifferent to how a ring is written."""

from itertools import pairwise
from math import dist, radians, sin

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from kernelscan.markup.hatching import hatch_lines

SQUARE = np.array([(0.0, 0.0), (10.0, 0.0), (10.0, 10.0), (0.0, 10.0)])


def length(lines: tuple) -> float:
    return sum(dist(*line) for line in lines)


def test_level_lines_of_a_square() -> None:
    # The line along the lower side is inside, the one along the upper side is not: areas side by side share none.
    lines = hatch_lines([SQUARE], 0.0, 2.5)
    assert [line[0][1] for line in lines] == [0.0, 2.5, 5.0, 7.5]
    assert all(dist(*line) == 10 for line in lines)


@settings(deadline=None)
@given(st.floats(0, 180), st.floats(0.3, 3))
def test_length_times_spacing_is_the_area(angle: float, spacing: float) -> None:
    # The sum over the lattice is the midpoint rule for the area; its error is at most about one chord at each end.
    lines = hatch_lines([SQUARE], angle, spacing)
    assert length(lines) * spacing == pytest.approx(100, abs=2 * spacing * 15)


def test_a_hole_stays_empty() -> None:
    hole = SQUARE[::-1] * 0.4 + 3
    lines = hatch_lines([SQUARE, hole], 0.0, 0.5)
    middles = np.array([np.mean(line, axis=0) for line in lines])
    inside = (np.abs(middles - 5) < 1.99).all(axis=1)
    assert not inside.any()
    assert length(lines) * 0.5 == pytest.approx(100 - 16)


@pytest.mark.parametrize("angle", [0.0, 15.0, 45.0, 135.0])
def test_turning_or_reversing_the_ring_changes_nothing(angle: float) -> None:
    lines = np.array(hatch_lines([SQUARE], angle, 1.3))
    for ring in (np.roll(SQUARE, 1, axis=0), SQUARE[::-1]):
        assert np.array(hatch_lines([ring], angle, 1.3)) == pytest.approx(lines)


def test_two_halves_hatch_as_the_whole() -> None:
    left, right = SQUARE * (0.5, 1), SQUARE * (0.5, 1) + (5, 0)
    halves = hatch_lines([left], 45, 1) + hatch_lines([right], 45, 1)
    assert length(halves) == pytest.approx(length(hatch_lines([SQUARE], 45, 1)), abs=0.2)


def test_lines_are_as_far_apart_as_asked() -> None:
    lines = hatch_lines([SQUARE], 30, 2.0)
    across = [-sin(radians(30)) * x + np.cos(radians(30)) * y for (x, y), _ in lines]
    assert all(b - a == pytest.approx(2.0) for a, b in pairwise(across))


def test_a_sliver_between_two_lines_has_none() -> None:
    assert hatch_lines([SQUARE * (1, 0.01) + (0, 0.5)], 0.0, 1.0) == ()
