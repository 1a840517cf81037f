"""The legend, the scale bar and the cautions: what a sheet says about itself."""

from collections.abc import Iterator, Sequence
from math import ceil, pi

import numpy as np

from kernelscan.coverage import Mount, Spot
from kernelscan.coverage.cautions import CAUTIONS
from kernelscan.markup.hatching import hatch_lines
from kernelscan.markup.metrics import text_width
from kernelscan.markup.paper import Scale
from kernelscan.markup.scene import Box, Fill, Hatch, Item, Stroke, Text
from kernelscan.markup.style import (
    BLACK,
    BODY,
    CONFLICT_PEN,
    HEADING,
    LINEWORK_PEN,
    MARKS,
    OBSTACLE_INK,
    OBSTACLE_PEN,
    ROOM_PEN,
    RULE_PEN,
    WHITE,
    ZONE_EDGE_PEN,
)
from kernelscan.markup.symbols import spot_symbol
from kernelscan.markup.text import LINE_PITCH, wrapped

__all__ = ["caution_items", "cautions_height", "legend_height", "legend_items", "scale_bar"]

PITCH = BODY * LINE_PITCH
ENTRY_WIDTH = 88.0
ENTRY_HEIGHT = 6.0
SWATCH = 14.0
BAR_HEIGHT = 11.0

_ZONES: tuple[tuple[Mount, str, float | None, float], ...] = (
    ("ceiling", "ceiling: zone, best point (360°)", None, 2 * pi),
    ("wall", "wall: zone, best point (180°)", pi / 2, pi),
    ("corner", "corner: zone, best point (its angle)", pi / 4, pi / 2),
)
_OTHERS = (
    ("A B C", "walls that exclude each other"),
    ("R001", "room outline, obstacle"),
    ("", "the drawing as it was read"),
)


def legend_height(width: float) -> float:
    """Return how high the legend is, with the scale bar over it, in a given width."""
    return BAR_HEIGHT + ceil(6 / _columns(width)) * ENTRY_HEIGHT + 1.0


def _columns(width: float) -> int:
    return max(1, min(3, int(width // ENTRY_WIDTH)))


def legend_items(box: Box, scale: Scale, imperial: bool) -> Iterator[Item]:
    """Yield the scale bar and, under it, what each mark means."""
    yield from scale_bar((box.left + 2, box.top - 4.5), scale, imperial, box.width - 40)
    columns = _columns(box.width)
    rows = ceil(6 / columns)
    for i in range(6):
        left = box.left + (i // rows) * ENTRY_WIDTH + 1
        bottom = box.top - BAR_HEIGHT - (i % rows + 1) * ENTRY_HEIGHT
        yield from _entry(i, Box(left, bottom + 0.7, left + SWATCH, bottom + ENTRY_HEIGHT - 0.5))


def _entry(i: int, swatch: Box) -> Iterator[Item]:
    yield from _zone_swatch(i, swatch) if i < 3 else _other_swatch(i, swatch)
    tag, words = (MARKS[_ZONES[i][0]].letter, _ZONES[i][1]) if i < 3 else _OTHERS[i - 3]
    x, y = swatch.right + 2, swatch.centre[1] - BODY / 2
    if tag:
        yield Text((x, y), tag, bold=True)
        x += text_width(tag, BODY, bold=True) + 2
    yield Text((x, y), words)


def _zone_swatch(i: int, box: Box) -> Iterator[Item]:
    mount, _, bearing, field = _ZONES[i]
    mark = MARKS[mount]
    yield Hatch(hatch_lines([np.array(box.corners)], mark.angle, mark.spacing), mark.hatch_pen)
    yield Stroke(box.corners, ZONE_EDGE_PEN, closed=True)
    x, y = box.centre
    at = {"ceiling": (x, y), "wall": (x, box.bottom), "corner": (box.left, box.bottom)}[mount]
    yield from spot_symbol(Spot(mount, np.array(at), field, bearing, 0.0, 0.0, ()), at)


def _other_swatch(i: int, box: Box) -> Iterator[Item]:
    middle = box.centre[1]
    line = ((box.left, middle), (box.right, middle))
    if i == 3:
        yield Stroke(line, CONFLICT_PEN)
    elif i == 4:
        yield Stroke(box.corners, ROOM_PEN, closed=True)
        obstacle = Box(box.centre[0] - 1.5, middle - 1.2, box.centre[0] + 1.5, middle + 1.2).corners
        yield Fill((obstacle,), OBSTACLE_INK, OBSTACLE_PEN)
    else:
        yield Stroke(line, LINEWORK_PEN)


def scale_bar(at: tuple[float, float], scale: Scale, imperial: bool, longest: float) -> Iterator[Item]:
    """Yield a bar of up to five equal parts, true to scale, with its left end at a point.

    A ruler laid on it tells whether a print has kept its scale.
    """
    part, unit, unit_length = _bar_part(scale, imperial, min(longest, 110.0) / 5)
    step = part * unit_length * scale.mm_per_metre
    x, y = at
    count = max(1, min(5, int(longest / step)))
    for k in range(count):
        cell = Box(x + k * step, y, x + (k + 1) * step, y + 1.6).corners
        yield Fill((cell,), BLACK if k % 2 == 0 else WHITE, ZONE_EDGE_PEN)
    for k in range(count + 1):
        yield Text((x + k * step, y - 3.3), f"{k * part:g}", anchor="middle")
    yield Text((x + count * step + 4, y - 3.3), unit)
    yield Text((x + count * step + 4, y + 0.9), scale.text, bold=True)


def _bar_part(scale: Scale, imperial: bool, longest: float) -> tuple[float, str, float]:
    """Return the length of one part of the bar, its unit and the unit in metres: 1, 2 or 5 times a power of ten."""
    unit, metres = ("ft", 0.3048) if imperial else ("m", 1.0)
    most = longest / (scale.mm_per_metre * metres)
    power = 10.0 ** np.floor(np.log10(most))
    digit = max(d for d in (1, 2, 5) if d * power <= most * (1 + 1e-9))
    return float(digit * power), unit, metres


def _caution_lines(width: float, extra: Sequence[str]) -> list[tuple[str, ...]]:
    return [wrapped(text, width - 7, BODY) for text in (*CAUTIONS, *extra)]


def cautions_height(width: float, extra: Sequence[str]) -> float:
    """Return how high the cautions are in a given width."""
    return sum(len(lines) for lines in _caution_lines(width, extra)) * PITCH + HEADING * LINE_PITCH + 2.5


def caution_items(box: Box, extra: Sequence[str]) -> Iterator[Item]:
    """Yield the cautions, and what else must be said of this drawing, one paragraph each."""
    yield Stroke(box.corners, RULE_PEN, closed=True)
    y = box.top - HEADING - 1.5
    yield Text((box.left + 1.5, y), "Read before use", HEADING, bold=True)
    for lines in _caution_lines(box.width, extra):
        for i, line in enumerate(lines):
            y -= PITCH
            if not i:
                yield Text((box.left + 1.5, y), "–")
            yield Text((box.left + 5, y), line)
