"""Fixtures: what is drawn as a named block, such as an air outlet, so that devices can be kept away from it by name.

The strokes of one copy of a block follow one another in the drawing's contents; the next copy begins where a stroke
of the block comes again. A fixture is named by its innermost block and stands in the room that holds its middle.
"""

from collections.abc import Iterator, Sequence

import numpy as np

from kernelscan.geometry.shapes import rings_around
from kernelscan.plan import Fixture, Source
from kernelscan.reading.strokes import Stroke

__all__ = ["fixtures_in_rings"]

LARGEST = 3.0
"""Metres: a block with a larger radius is a part of the building and no fixture."""


def fixtures_in_rings(
    rings: Sequence[np.ndarray], strokes: Sequence[Stroke], metres: float
) -> list[tuple[Fixture, ...]]:
    """Return the fixtures in each ring.

    Parameters
    ----------
    rings
        Simple, in metres.
    strokes
        In drawing units.
    metres
        How many metres a drawing unit is.
    """
    found = [fixture for copy in _copies(strokes) if (fixture := _fixture(copy, metres)).radius <= LARGEST]
    inside: list[list[Fixture]] = [[] for _ in rings]
    if found and len(rings):
        numbers, holders = rings_around(rings, np.array([each.centre for each in found]))
        for k, i in sorted(zip(numbers.tolist(), holders.tolist(), strict=True)):
            inside[i].append(found[k])
    return [tuple(each) for each in inside]


def _copies(strokes: Sequence[Stroke]) -> Iterator[list[Stroke]]:
    """Yield the strokes of each copy of a block."""
    copy: list[Stroke] = []
    seen: set[str] = set()
    for stroke in strokes:
        if copy and (stroke.blocks != copy[0].blocks or stroke.handle in seen):
            yield copy
            copy, seen = [], set()
        if stroke.blocks:
            copy.append(stroke)
            seen.add(stroke.handle)
    if copy:
        yield copy


def _fixture(copy: Sequence[Stroke], metres: float) -> Fixture:
    points = np.concatenate([stroke.points for stroke in copy]) * metres
    centre = (points.min(axis=0) + points.max(axis=0)) / 2
    radius = float(np.hypot(*(points - centre).T).max())
    first = copy[0]
    return Fixture(first.blocks.rsplit("/", 1)[-1], centre, radius, Source(first.layer, first.handle))
