"""The plan's block of a sheet: the whole plan, an overview with the key of its parts, or one part."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from itertools import product
from math import pi

import numpy as np

from kernelscan.coverage.wording import Custom
from kernelscan.markup.choice import Parts
from kernelscan.markup.clipping import clipped
from kernelscan.markup.drawing import (
    conflict_items,
    feature_items,
    hidden_items,
    linework_items,
    obstacle_items,
    outline_items,
    point_items,
    zone_items,
)
from kernelscan.markup.labels import Label, Line
from kernelscan.markup.layout import CAPTION, Layout
from kernelscan.markup.paper import Scale
from kernelscan.markup.scene import Box, Group, Item, Point, Stroke, Text
from kernelscan.markup.shown import ShownRoom
from kernelscan.markup.style import BODY, HEADING, MATCH_PEN
from kernelscan.markup.tags import Tags, number_tags, placed_tags
from kernelscan.markup.text import cut_to
from kernelscan.markup.view import PlanView
from kernelscan.plan import Plan, Room

__all__ = [
    "Part",
    "caption",
    "overview_groups",
    "part_groups",
    "parts_of",
    "plan_groups",
    "room_groups",
    "view_of",
]

OVERLAP = 8.0
"""How far a part goes on beyond a match line, in millimetres."""


@dataclass(frozen=True, slots=True)
class Part:
    """One part of a plan: its name, its cell in metres, and the names of the parts at its sides."""

    name: str
    cell: Box
    left: str
    right: str
    below: str
    above: str


def parts_of(parts: Parts, extent: Box, rooms: Sequence[Room]) -> list[Part]:
    """Return the parts that show a room, row by row from the top: A1, B1 and on, then A2, B2 and on."""
    width, height = extent.width / parts.columns, extent.height / parts.rows
    boxes = [_box_of(room.outline) for room in rooms]
    cells = {}
    for row, column in product(range(parts.rows), range(parts.columns)):
        left, top = extent.left + column * width, extent.top - row * height
        cell = Box(left, top - height, left + width, top)
        if any(cell.overlaps(box) for box in boxes):
            cells[column, row] = cell

    def name(column: int, row: int) -> str:
        return f"{_letters(column)}{row + 1}" if (column, row) in cells else ""

    return [
        Part(name(i, j), cell, name(i - 1, j), name(i + 1, j), name(i, j + 1), name(i, j - 1))
        for (i, j), cell in cells.items()
    ]


def _letters(number: int) -> str:
    """Return A to Z, then AA, AB and on."""
    return (_letters(number // 26 - 1) if number >= 26 else "") + chr(ord("A") + number % 26)


def view_of(layout: Layout, scale: Scale, shown: Box) -> PlanView:
    """Return the window of a layout's plan at a scale, a box of the plan in its middle."""
    plan = layout.plan
    return PlanView(Box(plan.left, plan.bottom + CAPTION, plan.right, plan.top), scale, shown.centre)


def plan_groups(
    plan: Plan, rooms: Sequence[ShownRoom], layout: Layout, scale: Scale, extent: Box, custom: Custom
) -> Iterator[Group]:
    """Yield the whole plan from back to front."""
    view = view_of(layout, scale, extent)
    tags = placed_tags(rooms, view, custom)
    yield Group("linework", tuple(linework_items(plan.linework, view, view.box)))
    yield from room_groups(rooms, view, tags)
    words = f"Plan, {scale.text} on {layout.paper.name}{_left_out(rooms)}"
    yield Group("caption", (caption(layout, words, tags),))


def room_groups(
    rooms: Sequence[ShownRoom], view: PlanView, tags: Tags, setting_out: tuple[Item, ...] = ()
) -> Iterator[Group]:
    """Yield rooms and all that is marked in them, from back to front; dimensions lie under the points."""
    yield Group("hidden", tuple(item for room in rooms for item in hidden_items(room, view)))
    yield Group("zones", tuple(item for room in rooms for item in zone_items(room, view)))
    yield Group("obstacles", tuple(item for room in rooms for item in obstacle_items(room.room, view)))
    yield Group("rooms", tuple(item for room in rooms for item in outline_items(room.room, view)))
    yield Group("features", tuple(item for room in rooms for item in feature_items(room, view)))
    yield Group("conflicts", tuple(item for room in rooms for item in conflict_items(room, view)))
    yield Group("setting-out", setting_out)
    yield Group("points", tuple(item for room in rooms for item in point_items(room, view)))
    yield Group("tags", tuple(item for tag in tags.placements for item in tag.items()))


def _left_out(rooms: Sequence[ShownRoom]) -> str:
    """That small features are left out on a plan, if any are."""
    return ", without the small features F1 and on" if any(room.features for room in rooms) else ""


def caption(layout: Layout, words: str, tags: Tags) -> Text:
    """Return the line under a plan, with the tags that found no place on it."""
    if tags.missing:
        words += f". Without a place here, see the schedule: {', '.join(tags.missing)}"
    plan = layout.plan
    return Text((plan.left + 2, plan.bottom + 1.8), cut_to(words, plan.width - 4, BODY, bold=True), bold=True)


def overview_groups(
    plan: Plan, rooms: Sequence[ShownRoom], layout: Layout, scale: Scale, extent: Box, parts: Parts
) -> Iterator[Group]:
    """Yield the plan with nothing but outlines and numbers, and the key of the parts over it."""
    view = view_of(layout, scale, extent)
    divided = parts_of(parts, extent, [room.room for room in rooms])
    names = [(Label((Line(part.name, bold=True, height=HEADING),), framed=True), part) for part in divided]
    tags = number_tags(rooms, view, [(label, view.box_on_paper(part.cell)) for label, part in names])
    yield Group("linework", tuple(linework_items(plan.linework, view, view.box)))
    yield Group("rooms", tuple(item for room in rooms for item in outline_items(room.room, view)))
    cells = [view.box_on_paper(part.cell).corners for part in divided]
    yield Group("parts", tuple(Stroke(corners, MATCH_PEN, closed=True) for corners in cells))
    yield Group("tags", tuple(item for tag in tags.placements for item in tag.items()))
    words = (
        f"Overview, {scale.text} on {layout.paper.name}; the parts {divided[0].name} to {divided[-1].name}"
    )
    told = f"{words} follow at {parts.scale.text}, with their zones and points"
    plan_box = layout.plan
    shown = cut_to(told, plan_box.width - 4, BODY, bold=True)
    yield Group("caption", (Text((plan_box.left + 2, plan_box.bottom + 1.8), shown, bold=True),))


def part_groups(
    plan: Plan, rooms: Sequence[ShownRoom], parts: Parts, part: Part, custom: Custom
) -> Iterator[Group]:
    """Yield one part of a plan, cut a little beyond its match lines."""
    layout = parts.layout
    view = view_of(layout, parts.scale, part.cell)
    cell, window = view.box_on_paper(part.cell), _window(view, part)
    shown = [room for room in rooms if _box_of(view.to_paper(room.room.outline)).overlaps(window)]
    lines = _match_lines(part, cell, window)
    framed = PlanView(window, view.scale, view.to_plan(window.centre))
    tags = placed_tags(shown, framed, custom, [line for _, line in lines])
    yield Group("linework", tuple(linework_items(plan.linework, view, window)))
    for group in room_groups(shown, view, tags):
        yield Group(group.name, tuple(clipped(group.items, window)))
    yield Group("parts", tuple(_match_items(lines, cell)))
    words = f"Part {part.name}, {parts.scale.text} on {layout.paper.name}{_left_out(shown)}"
    yield Group("caption", (caption(layout, words, tags),))


def _window(view: PlanView, part: Part) -> Box:
    """Return what a part shows: to the edge of the block where the plan ends, a little over each match line."""
    cell, block = view.box_on_paper(part.cell), view.box
    return Box(
        cell.left - OVERLAP if part.left else block.left,
        cell.bottom - OVERLAP if part.below else block.bottom,
        cell.right + OVERLAP if part.right else block.right,
        cell.top + OVERLAP if part.above else block.top,
    )


def _box_of(points: np.ndarray) -> Box:
    (left, bottom), (right, top) = points.min(axis=0), points.max(axis=0)
    return Box(float(left), float(bottom), float(right), float(top))


def _match_lines(part: Part, cell: Box, window: Box) -> list[tuple[str, tuple[Point, Point]]]:
    """Return the name of each part that goes on beyond a match line, and the line: left, right, below, above."""
    return [
        (name, line)
        for name, line in (
            (part.left, ((cell.left, window.bottom), (cell.left, window.top))),
            (part.right, ((cell.right, window.bottom), (cell.right, window.top))),
            (part.below, ((window.left, cell.bottom), (window.right, cell.bottom))),
            (part.above, ((window.left, cell.top), (window.right, cell.top))),
        )
        if name
    ]


def _match_items(lines: Sequence[tuple[str, tuple[Point, Point]]], cell: Box) -> Iterator[Item]:
    """Yield the match lines, and outside each, clear of the part, the name of the part that goes on there."""
    x, y = cell.centre
    out = OVERLAP + 2.0
    for name, line in lines:
        yield Stroke(line, MATCH_PEN)
        upright = line[0][0] == line[1][0]
        beyond = line[0][0] > x if upright else line[0][1] > y
        level = line[0][0] if upright else line[0][1]
        # Text stands on its baseline, so on the right and below it needs its own height more.
        level += out + (BODY if upright else 0.0) if beyond else -out - (0.0 if upright else BODY)
        at, angle = ((level, y), pi / 2) if upright else ((x, level), 0.0)
        yield Text(at, f"match line: part {name}", BODY, "middle", bold=True, angle=angle)
