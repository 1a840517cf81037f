"""Composition: from the answers to sheets of paper.

The first sheet shows the plan, or an overview of its parts, each of which then has a sheet. The schedule stands
beside or under the plan, and what does not fit there goes on over further sheets, none of it cut. Every sheet carries
the cautions and the title block.
"""

from collections.abc import Iterator, Sequence

from kernelscan.coverage import RoomZones
from kernelscan.coverage.wording import Custom
from kernelscan.markup.choice import Choice, chosen
from kernelscan.markup.options import SheetOptions
from kernelscan.markup.pages import (
    Page,
    about_the_drawing,
    finished,
    legend_group,
    schedule_group,
    schedule_pages,
)
from kernelscan.markup.plan_block import overview_groups, part_groups, parts_of, plan_groups
from kernelscan.markup.scene import Box, Scene
from kernelscan.markup.schedule import Schedule, schedule_of
from kernelscan.markup.view import plan_extent
from kernelscan.plan import Plan

__all__ = ["SheetOptions", "compose_zone_sheets"]

DEFAULT_OPTIONS = SheetOptions()


def compose_zone_sheets(
    plan: Plan, answers: Sequence[RoomZones], options: SheetOptions = DEFAULT_OPTIONS
) -> tuple[Scene, ...]:
    """Return the sheets of the main job: the plan with its zones, then the rest of the schedule.

    Parameters
    ----------
    plan
        Lengths in metres; its linework is the background.
    answers
        One for each room to be shown, in the schedule's order.
    options
        Paper, scale and title block; the same values give the same sheets, to the last digit.

    Raises
    ------
    InputError
        When a paper or a scale is unknown, or the parts of the plan would be more than 200 sheets.
    """
    custom = Custom(plan.unit.imperial)
    rooms = [zones.room for zones in answers]
    schedule, extent = schedule_of(answers, custom), plan_extent(plan, rooms)
    extra = about_the_drawing(plan, answers)
    choice = chosen(extent, rooms, schedule, extra, options, custom.imperial)
    pages = [
        *_plan_pages(plan, answers, choice, schedule, extent, custom),
        *schedule_pages(schedule, choice.layout, extra),
    ]
    return finished(plan, options, pages, extra)


def _plan_pages(
    plan: Plan, answers: Sequence[RoomZones], choice: Choice, schedule: Schedule, extent: Box, custom: Custom
) -> Iterator[Page]:
    """Yield the sheet of the plan with as much of the schedule as it holds, and the sheets of its parts."""
    layout, scale, parts = choice.layout, choice.scale, choice.parts
    if parts is None:
        groups = plan_groups(plan, answers, layout, scale, extent, custom)
    else:
        groups = overview_groups(plan, answers, layout, scale, extent, parts)
    first = schedule.entries[: schedule.fitting(0, layout.schedule.height)]
    table = schedule_group(schedule, layout.schedule, [first] if first else [])
    yield Page(layout, scale.text, (*groups, table, legend_group(layout, scale, custom)))
    if parts is None:
        return
    for part in parts_of(parts, extent, [zones.room for zones in answers]):
        groups = part_groups(plan, answers, parts, part, custom)
        yield Page(parts.layout, parts.scale.text, (*groups, legend_group(parts.layout, parts.scale, custom)))
