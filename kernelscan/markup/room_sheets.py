"""A sheet for each room: at the largest scale that fits, with its setting-out dimensions, aims and a key plan."""

from collections.abc import Iterator, Sequence
from itertools import dropwhile, islice

import numpy as np

from kernelscan.coverage import RoomAnswer
from kernelscan.coverage.wording import Custom
from kernelscan.markup.aims import aim_arcs, place_section_tags
from kernelscan.markup.dimensions import dimensions_on_paper, lengths_to_set_out
from kernelscan.markup.drawing import linework_items
from kernelscan.markup.layout import Blocks, Layout, arrangements
from kernelscan.markup.options import SheetOptions
from kernelscan.markup.pages import (
    Page,
    blocks_of,
    finished,
    legend_group,
    paragraphs,
    schedule_group,
    schedule_pages,
)
from kernelscan.markup.paper import Scale, largest_scale, paper_by_name, scale_by_text, usual_scales
from kernelscan.markup.plan_block import caption, room_groups, view_of
from kernelscan.markup.scene import Box, Fill, Group, Item, Scene, Stroke, Text
from kernelscan.markup.shown import ShownRoom, shown
from kernelscan.markup.style import BODY, PALE, RULE_PEN, TABLE_PEN, WHITE
from kernelscan.markup.tags import place_tags, tags_around_marks
from kernelscan.markup.text import clean_text
from kernelscan.markup.view import PlanView, plan_extent
from kernelscan.plan import Plan, Room

__all__ = ["compose_room_sheets"]

DEFAULT_OPTIONS = SheetOptions()
KEY_WIDTH, KEY_HEIGHT = 46.0, 36.0
"""Of the key plan with its title, in millimetres."""
KEY_INSET = 2.0
AROUND_ROOM = 13.0
"""Kept free around the room for its dimensions."""
SCALES_TRIED = 8
WORKING_SCALE = 50
"""A room that fits the smallest paper at this scale with its schedule is shown there, and else on the next."""


def compose_room_sheets(
    plan: Plan, answers: Sequence[RoomAnswer], options: SheetOptions = DEFAULT_OPTIONS
) -> tuple[Scene, ...]:
    """Return a sheet for each room, in order, its schedule on it or, where that does not fit, after it.

    Parameters
    ----------
    plan
        Lengths in metres; all its rooms are on the key plan.
    answers
        One for each room that gets a sheet.
    options
        Paper and title block. A scale is taken where the room fits it, and else the largest that fits.

    Raises
    ------
    InputError
        When the paper or the scale is unknown.
    """
    custom, rooms = Custom(plan.unit.imperial), [shown(answer) for answer in answers]
    cautions = paragraphs(plan, rooms)
    pages = [page for room in rooms for page in _pages(plan, room, options, cautions, custom)]
    return finished(plan, options, pages, cautions)


def _pages(
    plan: Plan, room: ShownRoom, options: SheetOptions, cautions: tuple[str, ...], custom: Custom
) -> Iterator[Page]:
    """Yield the sheet of a room, and one for its schedule where that does not fit beside it."""
    blocks, extent = blocks_of([room], custom, cautions), plan_extent(plan, [room.room])
    layout, scale = _layout(extent, blocks, options, custom.imperial)
    view, schedule = view_of(layout, scale, extent), blocks.schedule
    key = _key_box(view, extent)
    holds = schedule.fitting(0, layout.schedule.height)
    table = schedule_group(schedule, layout.schedule, [schedule.entries] if holds else [])
    groups = _groups(plan, room, view, layout, key, custom)
    yield Page(layout, scale.text, (*groups, table, legend_group(blocks.legend, layout, scale, custom)))
    yield from schedule_pages(blocks, layout)


def _layout(extent: Box, blocks: Blocks, options: SheetOptions, imperial: bool) -> tuple[Layout, Scale]:
    """Return layout and scale: as asked where the room fits, else the largest scale on the smallest paper that does.

    Of the arrangements, one that holds the room's schedule goes before one that does not.
    """
    wanted = scale_by_text(options.scale) if options.scale else None
    names = (options.paper,) if options.paper else ("letter", "ANSI B") if imperial else ("A4", "A3")
    for paper in map(paper_by_name, names):
        layouts = [
            layout
            for turned in (paper, paper.turned)
            for layout in arrangements(turned, blocks)
            if min(layout.space) > 0
        ]
        sized = [(layout, _scale_on(layout, extent, wanted, imperial)) for layout in layouts]
        layout, scale = min(
            sized, key=lambda each: (not blocks.schedule.fits(each[0].schedule), each[1].denominator)
        )
        good = scale == wanted or scale.denominator <= WORKING_SCALE
        if good and blocks.schedule.fits(layout.schedule):
            break
    return layout, scale


def _scale_on(layout: Layout, extent: Box, wanted: Scale | None, imperial: bool) -> Scale:
    largest = largest_scale((extent.width, extent.height), layout.space, imperial)
    if wanted is not None and wanted.denominator >= largest.denominator:
        return wanted
    return _scale_beside_key(layout, largest, extent, imperial)


def _scale_beside_key(layout: Layout, largest: Scale, extent: Box, imperial: bool) -> Scale:
    """Return the largest scale, from one that fits on, that leaves a corner to the key plan."""
    scales = dropwhile(lambda scale: scale.denominator < largest.denominator, usual_scales(imperial))
    for scale in islice(scales, SCALES_TRIED):
        if _key_box(view_of(layout, scale, extent), extent) is not None:
            return scale
    return largest


def _key_box(view: PlanView, extent: Box) -> Box | None:
    """Return a corner of the block that the room and its dimensions leave free."""
    block, room = view.box.grown(-KEY_INSET), view.box_on_paper(extent).grown(AROUND_ROOM)
    for left in (block.left, block.right - KEY_WIDTH):
        for bottom in (block.top - KEY_HEIGHT, block.bottom):
            box = Box(left, bottom, left + KEY_WIDTH, bottom + KEY_HEIGHT)
            if not box.overlaps(room):
                return box
    return None


def _groups(
    plan: Plan, room: ShownRoom, view: PlanView, layout: Layout, key: Box | None, custom: Custom
) -> Iterator[Group]:
    tags = tags_around_marks([room], view)
    if key is not None:
        tags.taken.add(key)
    dimensions = dimensions_on_paper(lengths_to_set_out(room), view, custom, tags.taken)
    arcs = aim_arcs(room, view, tags.taken)
    place_section_tags(tags, room, view, custom)
    place_tags(tags, [room], view, custom)
    yield Group("linework", tuple(linework_items(plan.linework, view, view.box)))
    drawn = [item for dimension in dimensions for item in dimension.items()]
    drawn += [item for turn in arcs for item in turn.items()]
    yield from room_groups([room], view, tags, tuple(drawn))
    if key is not None:
        yield Group("key", tuple(_key(plan, room.room, key)))
    words = f"{room.room.id} {clean_text(room.room.name)}, {view.scale.text} on {layout.paper.name}"
    yield Group("caption", (caption(layout, words, tags),))


def _key(plan: Plan, room: Room, box: Box) -> Iterator[Item]:
    """Yield a small plan of all rooms with the one in question filled."""
    yield Fill((box.corners,), WHITE, RULE_PEN)
    yield Text((box.left + 1.5, box.top - BODY - 1.2), "Key plan", bold=True)
    space = Box(box.left, box.bottom, box.right, box.top - 2 * BODY).grown(-2.0)
    extent = plan_extent(plan, plan.rooms)
    mm = min(space.width / max(extent.width, 1e-9), space.height / max(extent.height, 1e-9))
    view = PlanView(space, Scale(1000.0 / mm, ""), extent.centre)
    yield Fill((view.ring(np.asarray(room.outline)),), PALE)
    for each in plan.rooms:
        yield Stroke(view.ring(each.outline), TABLE_PEN, closed=True)
