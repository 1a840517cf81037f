"""The legend, the scale bar and the cautions: what a sheet says about itself."""

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass
from functools import partial
from math import ceil, degrees, inf, pi

import numpy as np

from kernelscan.coverage.device_spots import DeviceAnswer
from kernelscan.coverage.wording import Custom, angle_in_words
from kernelscan.markup.hatching import hatch_lines
from kernelscan.markup.metrics import text_width
from kernelscan.markup.paper import Scale
from kernelscan.markup.scene import Box, Fill, Hatch, Item, Point, Stroke, Text
from kernelscan.markup.shown import ShownRoom, ShownSpot, device_tag
from kernelscan.markup.style import (
    BLACK,
    BODY,
    CONFLICT_PEN,
    FEATURE_ANGLES,
    FEATURE_EDGE_PEN,
    FEATURE_PEN,
    FEATURE_SPACING,
    HEADING,
    HIDDEN_ANGLE,
    HIDDEN_PEN,
    HIDDEN_SPACING,
    LINEWORK_PEN,
    MARKS,
    OBSTACLE_INK,
    OBSTACLE_PEN,
    ROOM_PEN,
    RULE_PEN,
    SYMBOL_RADIUS,
    TRIED_LETTER,
    WHITE,
    ZONE_EDGE_PEN,
)
from kernelscan.markup.symbols import spot_symbol, tried_symbol
from kernelscan.markup.text import LINE_PITCH, clean_text, wrapped
from kernelscan.plan import Device, Fixing

__all__ = ["Legend", "LegendEntry", "caution_items", "cautions_height", "legend_of", "scale_bar"]

PITCH = BODY * LINE_PITCH
ENTRY_WIDTH = 88.0
ENTRY_HEIGHT = 6.0
SWATCH = 14.0
BAR_HEIGHT = 11.0
MOST_DEVICES = 12
"""More devices than this are not listed on every sheet."""

Swatch = Callable[[Box], Iterator[Item]]


@dataclass(frozen=True, slots=True)
class LegendEntry:
    """One mark: how it is drawn in a box, its tag, and what it means."""

    swatch: Swatch
    tag: str
    words: str


@dataclass(frozen=True, slots=True)
class Legend:
    """The marks that these sheets have, and a paragraph for each device."""

    entries: tuple[LegendEntry, ...]
    devices: tuple[str, ...] = ()

    def height(self, width: float) -> float:
        """Return how high the legend is, with the scale bar over it, in a given width."""
        told = sum(len(lines) for lines in self._device_lines(width)) * PITCH
        return BAR_HEIGHT + ceil(len(self.entries) / _columns(width)) * ENTRY_HEIGHT + told + 1.0

    def items(self, box: Box, scale: Scale, imperial: bool) -> Iterator[Item]:
        """Yield the scale bar and, under it, what each mark means and what each device is."""
        yield from scale_bar((box.left + 2, box.top - 4.5), scale, imperial, box.width - 40)
        rows = ceil(len(self.entries) / _columns(box.width))
        for i, entry in enumerate(self.entries):
            left = box.left + (i // rows) * ENTRY_WIDTH + 1
            bottom = box.top - BAR_HEIGHT - (i % rows + 1) * ENTRY_HEIGHT
            yield from _drawn(entry, Box(left, bottom + 0.7, left + SWATCH, bottom + ENTRY_HEIGHT - 0.5))
        y = box.top - BAR_HEIGHT - rows * ENTRY_HEIGHT
        for tag, lines in zip(_tags(self.devices), self._device_lines(box.width), strict=True):
            yield Text((box.left + 1, y - PITCH + 0.9), tag, bold=True)
            for line in lines:
                y -= PITCH
                yield Text((box.left + 11, y + 0.9), line)

    def _device_lines(self, width: float) -> list[tuple[str, ...]]:
        return [wrapped(words, width - 13, BODY) for words in self.devices]


def legend_of(rooms: Sequence[ShownRoom], custom: Custom) -> Legend:
    """Return the legend of sheets that show these rooms."""
    devices = next((each.answer.devices for each in rooms if each.answer.devices), ())
    fixings: list[Fixing] = ["ceiling", "wall", "corner"]
    if devices:
        used = {fixing for each in devices for fixing in each.device.fixings}
        fixings = [fixing for fixing in MARKS if fixing in used]
    entries = [_zone_entry(fixing, bool(devices)) for fixing in fixings]
    if devices:
        entries.append(LegendEntry(_device_swatch, "D1", "point of a device, and its aim"))
    if any(spot.is_partial for room in rooms for spot in room.spots):
        entries.append(LegendEntry(_partial_swatch, "D1 94 %", "best partial point: floor seen"))
    if any(room.tried is not None for room in rooms):
        entries.append(LegendEntry(_tried_swatch, TRIED_LETTER, "best point tried, floor it misses"))
    if any(room.features for room in rooms):
        entries.append(LegendEntry(_feature_swatch, "F1", "small feature that was left out"))
    return Legend((*entries, *_ALWAYS), _device_words(devices, custom))


def _device_words(devices: Sequence[DeviceAnswer], custom: Custom) -> tuple[str, ...]:
    words = [_in_words(answer.device, custom) for answer in devices[:MOST_DEVICES]]
    if len(devices) > MOST_DEVICES:
        words.append(f"and {len(devices) - MOST_DEVICES} more: see the schedule and the device file")
    return tuple(words)


def _tags(devices: Sequence[str]) -> list[str]:
    tags = [device_tag(index) for index in range(len(devices))]
    return tags if len(tags) <= MOST_DEVICES else [*tags[:MOST_DEVICES], "…"]


def _in_words(device: Device, custom: Custom) -> str:
    """Return a device's name, kind, field, height, tilt and range, as far as the file gives them."""
    field = f"field {angle_in_words(device.horizontal_field)}"
    if device.vertical_field is not None:
        field += f" by {angle_in_words(device.vertical_field)}"
    unit = "" if custom.imperial else " m"
    parts = [f"{clean_text(device.name)} ({clean_text(device.kind)})", field]
    if device.height is not None:
        parts.append(f"{custom.length(device.height)} high")
    if device.vertical_field is not None or device.tilt:
        parts.append(f"tilt {degrees(device.tilt):.0f}°")
    if device.farthest < inf:
        parts.append(f"range {custom.range_up(device.farthest)}{unit}")
    if device.density is not None:
        parts.append(f"{device.density:g} px/m wanted")
    return ", ".join(parts)


def _columns(width: float) -> int:
    return max(1, min(3, int(width // ENTRY_WIDTH)))


def _drawn(entry: LegendEntry, swatch: Box) -> Iterator[Item]:
    yield from entry.swatch(swatch)
    x, y = swatch.right + 2, swatch.centre[1] - BODY / 2
    if entry.tag:
        yield Text((x, y), entry.tag, bold=True)
        x += text_width(entry.tag, BODY, bold=True) + 2
    yield Text((x, y), entry.words)


_SECTORS: dict[Fixing, tuple[str, float | None, float]] = {
    "ceiling": ("360°", None, 2 * pi),
    "wall": ("180°", pi / 2, pi),
    "corner": ("its angle", pi / 4, pi / 2),
    "floor": ("360°", None, 2 * pi),
}
"""Of each kind of mount the field that is needed there, and bearing and field of its symbol."""


def _zone_entry(fixing: Fixing, with_devices: bool) -> LegendEntry:
    mark, (field, *_) = MARKS[fixing], _SECTORS[fixing]
    words = "zone of one device" if with_devices else f"zone, best point ({field})"
    return LegendEntry(partial(_zone_swatch, fixing), mark.letter, f"{mark.word}: {words}")


def _zone_swatch(fixing: Fixing, box: Box) -> Iterator[Item]:
    mark = MARKS[fixing]
    yield Hatch(hatch_lines([np.array(box.corners)], mark.angle, mark.spacing), mark.hatch_pen)
    yield Stroke(box.corners, ZONE_EDGE_PEN, closed=True)
    x, y = box.centre
    at = {"wall": (x, box.bottom), "corner": (box.left, box.bottom)}.get(fixing, (x, y))
    yield from spot_symbol(_example(fixing, at), at)


def _example(fixing: Fixing, at: Point, aims: tuple[float, ...] = (), is_partial: bool = False) -> ShownSpot:
    _, bearing, field = _SECTORS[fixing]
    return ShownSpot("", fixing, (), np.array(at), bearing, field, aims, is_partial=is_partial)


def _device_swatch(box: Box) -> Iterator[Item]:
    at = (box.left + 1, box.bottom)
    yield from spot_symbol(_example("corner", at, (pi / 6,)), at)


def _partial_swatch(box: Box) -> Iterator[Item]:
    at = (box.left + 1, box.bottom)
    yield from spot_symbol(_example("corner", at, (pi / 6,), is_partial=True), at)


def _tried_swatch(box: Box) -> Iterator[Item]:
    right = Box(box.left + 6, box.bottom, box.right, box.top)
    yield Hatch(hatch_lines([np.array(right.corners)], HIDDEN_ANGLE, HIDDEN_SPACING), HIDDEN_PEN)
    yield Stroke(right.corners, HIDDEN_PEN, closed=True)
    yield from tried_symbol((box.left + SYMBOL_RADIUS, box.centre[1]))


def _feature_swatch(box: Box) -> Iterator[Item]:
    for angle in FEATURE_ANGLES:
        yield Hatch(hatch_lines([np.array(box.corners)], angle, FEATURE_SPACING), FEATURE_PEN)
    yield Stroke(box.corners, FEATURE_EDGE_PEN, closed=True)


def _conflict_swatch(box: Box) -> Iterator[Item]:
    yield Stroke(((box.left, box.centre[1]), (box.right, box.centre[1])), CONFLICT_PEN)


def _room_swatch(box: Box) -> Iterator[Item]:
    x, y = box.centre
    yield Stroke(box.corners, ROOM_PEN, closed=True)
    yield Fill((Box(x - 1.5, y - 1.2, x + 1.5, y + 1.2).corners,), OBSTACLE_INK, OBSTACLE_PEN)


def _linework_swatch(box: Box) -> Iterator[Item]:
    yield Stroke(((box.left, box.centre[1]), (box.right, box.centre[1])), LINEWORK_PEN)


_ALWAYS = (
    LegendEntry(_conflict_swatch, "A B C", "walls that exclude each other"),
    LegendEntry(_room_swatch, "R001", "room outline, obstacle"),
    LegendEntry(_linework_swatch, "", "the drawing as it was read"),
)


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


def _caution_lines(width: float, cautions: Sequence[str]) -> list[tuple[str, ...]]:
    return [wrapped(text, width - 7, BODY) for text in cautions]


def cautions_height(width: float, cautions: Sequence[str]) -> float:
    """Return how high the cautions are in a given width."""
    lines = sum(len(lines) for lines in _caution_lines(width, cautions))
    return lines * PITCH + HEADING * LINE_PITCH + 2.5


def caution_items(box: Box, cautions: Sequence[str]) -> Iterator[Item]:
    """Yield the cautions, and what else must be said of this drawing, one paragraph each."""
    yield Stroke(box.corners, RULE_PEN, closed=True)
    y = box.top - HEADING - 1.5
    yield Text((box.left + 1.5, y), "Read before use", HEADING, bold=True)
    for lines in _caution_lines(box.width, cautions):
        for i, line in enumerate(lines):
            y -= PITCH
            if not i:
                yield Text((box.left + 1.5, y), "–")
            yield Text((box.left + 5, y), line)
