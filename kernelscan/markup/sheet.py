"""Composition: from the answers to sheets of paper.

The first sheet shows the plan, or an overview of its parts, each of which then has a sheet. The schedule stands
beside or under the plan, and what does not fit there goes on over further sheets, none of it cut. Every sheet carries
the cautions and the title block.
"""

from collections.abc import Iterator, Sequence

from kernelscan.coverage import RoomAnswer
from kernelscan.coverage.wording import Custom
from kernelscan.markup.choice import Choice, chosen
from kernelscan.markup.layout import Blocks
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
from kernelscan.markup.plan_block import overview_groups, part_groups, parts_of, plan_groups
from kernelscan.markup.scene import Box, Scene
from kernelscan.markup.shown import ShownRoom, shown
from kernelscan.markup.view import plan_extent
from kernelscan.plan import Plan

__all__ = ["SheetOptions", "compose_zone_sheets"]

DEFAULT_OPTIONS = SheetOptions()


def compose_zone_sheets(
    plan: Plan, answers: Sequence[RoomAnswer], options: SheetOptions = DEFAULT_OPTIONS
) -> tuple[Scene, ...]:
    """Return the sheets of the main job: the plan with its zones, then the rest of the schedule.

    Parameters
    ----------
    plan
        Lengths in metres; its linework is the background.
    answers
        One for each room to be shown, in the schedule's order. With devices the schedule is by device.
    options
        Paper, scale and title block; the same values give the same sheets, to the last digit.

    Raises
    ------
    InputError
        When a paper or a scale is unknown, or the parts of the plan would be more than 200 sheets.
    """
    custom = Custom(plan.unit.imperial)
    rooms = [shown(answer) for answer in answers]
    extent = plan_extent(plan, [room.room for room in rooms])
    blocks = blocks_of(rooms, custom, paragraphs(plan, rooms))
    choice = chosen(extent, [room.room for room in rooms], blocks, options, custom.imperial)
    pages = [
        *_plan_pages(plan, rooms, choice, blocks, extent, custom),
        *schedule_pages(blocks, choice.layout),
    ]
    return finished(plan, options, pages, blocks.cautions)


def _plan_pages(
    plan: Plan, rooms: Sequence[ShownRoom], choice: Choice, blocks: Blocks, extent: Box, custom: Custom
) -> Iterator[Page]:
    """Yield the sheet of the plan with as much of the schedule as it holds, and the sheets of its parts."""
    layout, scale, parts, schedule = choice.layout, choice.scale, choice.parts, blocks.schedule
    if parts is None:
        groups = plan_groups(plan, rooms, layout, scale, extent, custom)
    else:
        groups = overview_groups(plan, rooms, layout, scale, extent, parts)
    first = schedule.entries[: schedule.fitting(0, layout.schedule.height)]
    table = schedule_group(schedule, layout.schedule, [first] if first else [])
    yield Page(layout, scale.text, (*groups, table, legend_group(blocks.legend, layout, scale, custom)))
    if parts is None:
        return
    for part in parts_of(parts, extent, [room.room for room in rooms]):
        groups = part_groups(plan, rooms, parts, part, custom)
        legend = legend_group(blocks.legend, parts.layout, parts.scale, custom)
        yield Page(parts.layout, parts.scale.text, (*groups, legend))
