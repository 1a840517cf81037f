"""What a room knows of its openings."""

from math import cos, pi, sin

import numpy as np
import pytest

from kernelscan.geometry.rings import as_ring
from kernelscan.plan import Opening, Room, WallRef

SQUARE = [(0, 0), (4, 0), (4, 4), (0, 4)]
DRUM = [(3 * cos(k * pi / 30), 3 * sin(k * pi / 30)) for k in range(60)]


def room(points, *openings):
    walls = [Opening(WallRef(0, edge), kind, 1.0, span) for edge, kind, *span in openings]
    return Room("R001", "Hall", as_ring(np.array(points)), openings=tuple(walls))


def along(first, last):
    """A door from the middle of one chord to the middle of another."""
    return [
        (edge % 60, "door", 0.5 if edge == first else 0.0, 0.5 if edge == last else 1.0)
        for edge in range(first, last + 1)
    ]


@pytest.mark.parametrize(
    ("openings", "count"),
    [
        ([], 0),
        (along(3, 3), 1),
        (along(3, 10), 1),
        (along(57, 63), 1),
        ([*along(3, 10), *along(20, 24)], 2),
        ([*along(3, 10), *along(11, 14)], 2),
        ([(3, "door", 0.5, 1.0), (4, "window", 0.0, 0.5)], 2),
        ([(edge, "window", 0.0, 1.0) for edge in range(60)], 1),
    ],
)
def test_an_opening_in_a_curved_wall_counts_once(openings, count):
    assert room(DRUM, *openings).opening_count == count


def test_doors_at_either_side_of_a_corner_are_two():
    assert room(SQUARE, (0, "door", 0.5, 1.0), (1, "door", 0.0, 0.5)).opening_count == 2


def test_doors_in_one_wall_are_two():
    assert room(SQUARE, (0, "door", 0.0, 0.2), (0, "door", 0.5, 1.0)).opening_count == 2
