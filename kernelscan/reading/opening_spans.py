"""Stretches of one wall that drawn pieces of doors and windows cover, made into one stretch for each opening.

Stretches that overlap, or have no more than a post between, are one opening. Where doors stand in a glazed front, each
door is an opening and the glass on either side is a window; a strip of glass too narrow for that belongs to the door.
"""

from collections.abc import Iterable, Iterator, Sequence

from kernelscan.reading.segments import DOOR, WINDOW

__all__ = ["NARROWEST", "Span", "merged_spans"]

NARROWEST = 0.1
"""No door or window is narrower, in metres, and no post between two of them can carry a device."""

NARROWEST_GLASS = 0.2
"""Glass beside a door that is narrower than this, in metres, is part of the door."""

Span = tuple[float, float, int]
"""From, to, in metres along a wall, and DOOR or WINDOW."""


def merged_spans(spans: Iterable[Span], length: float, snap: float) -> list[Span]:
    """Return the openings of one wall, which do not overlap, from what is drawn of them.

    Parameters
    ----------
    spans
        In order of their beginnings.
    length
        Of the wall.
    snap
        What ends as near as this to an end of the wall ends there.
    """
    snapped = [_to_ends(span, length, snap) for span in spans]
    return [span for cluster in _clusters(snapped) for span in _by_kind(cluster)]


def _to_ends(span: Span, length: float, snap: float) -> Span:
    low, high, code = span
    return (0.0 if low <= snap else low, length if high >= length - snap else high, code)


def _clusters(spans: Sequence[Span]) -> Iterator[list[Span]]:
    """Yield the spans of an edge, which are sorted, in clusters that overlap or have only a post between."""
    cluster: list[Span] = []
    reach = 0.0
    for span in spans:
        if cluster and span[0] - reach > NARROWEST:
            yield cluster
            cluster = []
        reach = max(reach, span[1]) if cluster else span[1]
        cluster.append(span)
    yield cluster


def _by_kind(cluster: Sequence[Span]) -> Iterator[Span]:
    """Yield a cluster as one opening; where doors stand beside windows, each of them as one."""
    low, high = cluster[0][0], max(span[1] for span in cluster)
    doors = [(span[0], span[1], DOOR) for span in cluster if span[2] == DOOR]
    if not doors:
        yield (low, high, WINDOW)
        return
    at = low
    for start, end in [(part[0][0], max(span[1] for span in part)) for part in _clusters(doors)]:
        beside = start - at >= NARROWEST_GLASS
        if beside:
            yield (at, start, WINDOW)
        last = high - end < NARROWEST_GLASS
        yield (start if beside else at, high if last else end, DOOR)
        at = high if last else end
    if at < high:
        yield (at, high, WINDOW)
