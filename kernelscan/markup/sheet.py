"""Composition: from the answers to sheets of paper.

The first sheet shows the plan; the schedule stands beside or under it, and what does not fit goes on over further
sheets, none of it cut. Every sheet carries the cautions and the title block.
"""

from collections import Counter
from collections.abc import Iterator, Sequence

from kernelscan.coverage import RoomZones
from kernelscan.markup.drawing import (
    conflict_items,
    linework_items,
    obstacle_items,
    outline_items,
    zone_items,
)
from kernelscan.markup.layout import CAPTION, Layout, chosen_layout, schedule_layout
from kernelscan.markup.legend import caution_items, legend_items
from kernelscan.markup.options import SheetOptions
from kernelscan.markup.paper import Paper, Scale
from kernelscan.markup.scene import Box, Group, Item, Scene, Stroke, Text
from kernelscan.markup.schedule import Entry, Schedule, schedule_of
from kernelscan.markup.style import FRAME_PEN, RULE_PEN
from kernelscan.markup.symbols import spot_symbol
from kernelscan.markup.tags import Tags, placed_tags
from kernelscan.markup.text import clean_text, cut_to
from kernelscan.markup.titleblock import SheetNumber, title_block
from kernelscan.markup.view import PlanView, plan_extent
from kernelscan.markup.wording import Custom
from kernelscan.plain_text import plain_text
from kernelscan.plan import Plan

__all__ = ["SheetOptions", "compose_zone_sheets"]

DEFAULT_OPTIONS = SheetOptions()
COLUMN_GAP = 4.0
"""Between two columns of a schedule sheet, in millimetres."""


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
        When paper or scale are unknown, or the plan does not fit the two that were given.
    """
    custom = Custom(plan.unit.imperial)
    rooms = [zones.room for zones in answers]
    schedule, extent = schedule_of(answers, custom), plan_extent(plan, rooms)
    extra = _about_the_drawing(plan, answers)
    layout, scale = chosen_layout(extent, rooms, schedule, extra, options, custom.imperial)
    here = schedule.fitting(0, layout.schedule.height)
    rest = _pages(schedule, here, schedule_layout(layout.paper, extra))
    count = 1 + len(rest)
    view = _view(layout, scale, extent)
    groups = [
        *_plan_groups(plan, answers, view, layout, custom),
        _schedule_group(schedule, layout.schedule, [schedule.entries[:here]] if here else []),
        Group("legend", tuple(legend_items(layout.legend, scale, custom.imperial))),
    ]
    sheets = [
        _sheet(plan, options, layout, groups, extra, SheetNumber(1, count, layout.paper.name, scale.text))
    ]
    for number, columns in enumerate(rest, 2):
        further = schedule_layout(layout.paper, extra)
        group = _schedule_group(schedule, further.schedule, columns)
        sheets.append(
            _sheet(
                plan, options, further, [group], extra, SheetNumber(number, count, layout.paper.name, "none")
            )
        )
    return tuple(sheets)


def _about_the_drawing(plan: Plan, answers: Sequence[RoomZones]) -> tuple[str, ...]:
    """Return what must be said of this drawing in particular."""
    lines = [f"How rooms were found: {plain_text(plan.room_rule, 400)}"] if plan.room_rule else []
    if not answers:
        lines.append("No closed room was found in this drawing: nothing is marked.")
    met = Counter(clean_text(problem.code) for problem in plan.problems)
    if met:
        kinds = ", ".join(f"{code} ({count})" for code, count in sorted(met.items()))
        lines.append(f"Met in the drawing, and told in the report: {kinds}.")
    return tuple(lines)


def _view(layout: Layout, scale: Scale, extent: Box) -> PlanView:
    plan = layout.plan
    return PlanView(Box(plan.left, plan.bottom + CAPTION, plan.right, plan.top), scale, extent.centre)


def _plan_groups(
    plan: Plan, answers: Sequence[RoomZones], view: PlanView, layout: Layout, custom: Custom
) -> Iterator[Group]:
    """Yield the plan from back to front; the group of setting-out dimensions has its place under the points."""
    tags = placed_tags(answers, view, custom)
    rooms = [zones.room for zones in answers]
    yield Group("linework", tuple(linework_items(plan.linework, view, view.box)))
    yield Group("zones", tuple(item for zones in answers for item in zone_items(zones, view)))
    yield Group("obstacles", tuple(item for room in rooms for item in obstacle_items(room, view)))
    yield Group("rooms", tuple(item for room in rooms for item in outline_items(room, view)))
    yield Group("conflicts", tuple(item for zones in answers for item in conflict_items(zones, view)))
    yield Group("setting-out", ())
    spots = [spot for zones in answers for spot in zones.recommended]
    yield Group("points", tuple(item for spot in spots for item in spot_symbol(spot, view.point(spot.point))))
    yield Group("tags", tuple(item for tag in tags.placements for item in tag.items()))
    yield Group("caption", tuple(_caption(layout, view.scale, tags)))


def _caption(layout: Layout, scale: Scale, tags: Tags) -> Iterator[Item]:
    plan = layout.plan
    words = f"Plan, {scale.text} on {layout.paper.name}"
    if tags.missing:
        words += f". Without a place here, see the schedule: {', '.join(tags.missing)}"
    yield Text((plan.left + 2, plan.bottom + 1.8), cut_to(words, plan.width - 4, 2.5, bold=True), bold=True)


def _pages(schedule: Schedule, first: int, layout: Layout) -> list[list[Sequence[Entry]]]:
    """Return the entries that are left from the first on: a list of columns for each further sheet."""
    space, pages = layout.schedule, []
    columns = max(1, int((space.width + COLUMN_GAP) // (schedule.width + COLUMN_GAP)))
    while first < len(schedule.entries):
        page: list[Sequence[Entry]] = []
        for _ in range(columns):
            count = max(schedule.fitting(first, space.height), 1)
            page.append(schedule.entries[first : first + count])
            first += count
        pages.append([column for column in page if column])
    return pages


def _schedule_group(schedule: Schedule, space: Box, columns: Sequence[Sequence[Entry]]) -> Group:
    items: list[Item] = []
    for i, entries in enumerate(columns):
        items += schedule.items(space.left + 1 + i * (schedule.width + COLUMN_GAP), space.top, entries)
    return Group("schedule", tuple(items))


def _sheet(
    plan: Plan,
    options: SheetOptions,
    layout: Layout,
    groups: Sequence[Group],
    extra: Sequence[str],
    sheet: SheetNumber,
) -> Scene:
    file = clean_text(plan.file)
    return Scene(
        layout.paper.width,
        layout.paper.height,
        f"{file}: where one device sees every wall, sheet {sheet.number} of {sheet.count}",
        f"Plan view with mount zones, schedule of rooms and cautions; {sheet.paper}, scale {sheet.scale}.",
        (
            *groups,
            Group("cautions", tuple(caution_items(layout.cautions, extra))),
            Group("title-block", title_block(layout.title, plan, options, sheet)),
            Group("frame", tuple(_frame(layout.paper, layout.plan))),
        ),
    )


def _frame(paper: Paper, plan: Box) -> Iterator[Item]:
    """Yield the border, the plan's own border, and four centring marks outside it (after ISO 5457)."""
    frame = paper.frame
    if plan.width and plan.height:
        yield Stroke(plan.corners, RULE_PEN, closed=True)
    yield Stroke(frame.corners, FRAME_PEN, closed=True)
    x, y = paper.width / 2, paper.height / 2
    yield Stroke(((x, 2.0), (x, frame.bottom)), FRAME_PEN)
    yield Stroke(((x, paper.height - 2.0), (x, frame.top)), FRAME_PEN)
    yield Stroke(((2.0, y), (frame.left, y)), FRAME_PEN)
    yield Stroke(((paper.width - 2.0, y), (frame.right, y)), FRAME_PEN)
