"""A part of a scene: what lies in a window, cut at its border."""

from collections.abc import Iterable, Iterator

import numpy as np

from kernelscan.geometry import shapes
from kernelscan.markup.scene import Box, Fill, Hatch, Item, Point, Stroke, Text, points_of
from kernelscan.markup.view import clipped_polyline, clipped_segment

__all__ = ["clipped"]


def clipped(items: Iterable[Item], window: Box) -> Iterator[Item]:
    """Yield the items that lie in a window, the others as far as they do; text is kept whole or left out."""
    for item in items:
        match item:
            case Stroke(points, _, closed):
                yield from _stroke(item, points + points[:1] if closed else points, window)
            case Fill():
                yield from _fill(item, window)
            case Hatch(lines, pen):
                kept = tuple(filter(None, (clipped_segment(*line, window) for line in lines)))
                if kept:
                    yield Hatch(kept, pen)
            case Text():
                if _within(item.corners, window):
                    yield item


def _within(points: Iterable[Point], window: Box) -> bool:
    return all(window.left <= x <= window.right and window.bottom <= y <= window.top for x, y in points)


def _stroke(stroke: Stroke, points: tuple[Point, ...], window: Box) -> Iterator[Item]:
    if _within(points, window):
        yield stroke
        return
    for piece in clipped_polyline(np.array(points), window):
        yield Stroke(piece, stroke.pen)


def _fill(fill: Fill, window: Box) -> Iterator[Item]:
    """Yield an area cut at the window; its border is not drawn where it is cut."""
    if all(_within(ring, window) for ring in fill.rings):
        yield fill
        return
    outline, *holes = (np.array(ring) for ring in fill.rings)
    frame = shapes.Patch(np.array(window.corners))
    for piece in shapes.intersection(shapes.Patch(outline, holes), frame):
        rings = (np.asarray(piece.outline), *(np.asarray(hole) for hole in piece.holes))
        yield Fill(tuple(points_of(ring) for ring in rings), fill.ink)
    if fill.pen is not None:
        for ring in fill.rings:
            yield from _stroke(Stroke(ring, fill.pen, closed=True), (*ring, ring[0]), window)
