"""What every sheet has: its frame, cautions and title block around the page's own groups; and pages of schedule."""

from collections import Counter
from collections.abc import Iterator, Sequence
from dataclasses import dataclass

from kernelscan.coverage.cautions import cautions_for
from kernelscan.coverage.wording import Custom
from kernelscan.markup.device_schedule import device_schedule
from kernelscan.markup.layout import Blocks, Layout, schedule_layout
from kernelscan.markup.legend import Legend, caution_items, legend_of
from kernelscan.markup.options import SheetOptions
from kernelscan.markup.paper import Paper, Scale
from kernelscan.markup.room_schedule import room_schedule
from kernelscan.markup.scene import Box, Group, Item, Scene, Stroke
from kernelscan.markup.schedule import Entry, Schedule
from kernelscan.markup.shown import ShownRoom
from kernelscan.markup.style import FRAME_PEN, RULE_PEN
from kernelscan.markup.text import clean_text
from kernelscan.markup.titleblock import SheetNumber, title_block
from kernelscan.plain_text import plain_text
from kernelscan.plan import Plan

__all__ = ["Page", "blocks_of", "finished", "legend_group", "paragraphs", "schedule_group", "schedule_pages"]

COLUMN_GAP = 4.0
"""Between two columns of a schedule sheet, in millimetres."""


@dataclass(frozen=True, slots=True)
class Page:
    """What is particular to one sheet: its layout, its scale in words and its own groups."""

    layout: Layout
    scale: str
    groups: tuple[Group, ...]


def blocks_of(rooms: Sequence[ShownRoom], custom: Custom, cautions: tuple[str, ...]) -> Blocks:
    """Return what the blocks beside a plan of some rooms hold."""
    with_devices = any(room.answer.devices for room in rooms)
    schedule = device_schedule(rooms, custom) if with_devices else room_schedule(rooms, custom)
    return Blocks(schedule, legend_of(rooms, custom), cautions)


def finished(
    plan: Plan, options: SheetOptions, pages: Sequence[Page], cautions: Sequence[str]
) -> tuple[Scene, ...]:
    """Return the pages as numbered sheets."""
    return tuple(
        _sheet(
            plan, options, page, cautions, SheetNumber(number, len(pages), page.layout.paper.name, page.scale)
        )
        for number, page in enumerate(pages, 1)
    )


def legend_group(legend: Legend, layout: Layout, scale: Scale, custom: Custom) -> Group:
    """Return the scale bar and the legend."""
    return Group("legend", tuple(legend.items(layout.legend, scale, custom.imperial)))


def schedule_pages(blocks: Blocks, first: Layout) -> Iterator[Page]:
    """Yield the sheets that carry what of the schedule the first sheet does not hold."""
    schedule, layout = blocks.schedule, schedule_layout(first.paper, blocks.cautions)
    for columns in _pages(schedule, schedule.fitting(0, first.schedule.height), layout):
        yield Page(layout, "none", (schedule_group(schedule, layout.schedule, columns),))


def paragraphs(plan: Plan, rooms: Sequence[ShownRoom]) -> tuple[str, ...]:
    """Return the cautions for these rooms' devices, and what must be said of this drawing in particular."""
    kinds = {each.device.kind: None for room in rooms for each in room.answer.devices}
    lines = [*cautions_for(kinds), *_about_the_answers(rooms, Custom(plan.unit.imperial))]
    if plan.room_rule:
        lines.append(f"How rooms were found: {plain_text(plan.room_rule, 400)}")
    if not rooms:
        lines.append("No closed room was found in this drawing: nothing is marked.")
    met = Counter(clean_text(problem.code) for problem in plan.problems)
    if met:
        found = ", ".join(f"{code} ({count})" for code, count in sorted(met.items()))
        lines.append(f"Met in the drawing, and told in the report: {found}.")
    return tuple(lines)


def _about_the_answers(rooms: Sequence[ShownRoom], custom: Custom) -> Iterator[str]:
    """Yield whose zones are hatched, and what was left out of the rooms for them."""
    simplified = [room.answer.tolerant.simplified for room in rooms if room.answer.tolerant is not None]
    if simplified:
        none = sum(room.answer.zones.kernel.kind == "empty" for room in rooms)
        unit = "" if custom.imperial else " mm"
        yield (
            f"Small features up to {custom.tolerance_down(simplified[0].depth)}{unit} left out: "
            f"{sum(len(each.features) for each in simplified)} of them. Zones and points are those of the rooms "
            f"without them; exact answer: no single point in {none} of {len(rooms)} rooms. The schedule has both."
        )
    if any(len(room.answer.devices) > 1 for room in rooms):
        yield (
            "Of several devices the zones of the cheapest that covers the room are hatched, or of the first where none "
            "has a cost; each device's point is at the first of its fixings that covers the room."
        )


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


def schedule_group(schedule: Schedule, space: Box, columns: Sequence[Sequence[Entry]]) -> Group:
    """Return columns of the schedule side by side."""
    items: list[Item] = []
    for i, entries in enumerate(columns):
        items += schedule.items(space.left + 1 + i * (schedule.width + COLUMN_GAP), space.top, entries)
    return Group("schedule", tuple(items))


def _sheet(
    plan: Plan, options: SheetOptions, page: Page, cautions: Sequence[str], sheet: SheetNumber
) -> Scene:
    file, layout = clean_text(plan.file), page.layout
    return Scene(
        layout.paper.width,
        layout.paper.height,
        f"{file}: where one device sees every wall, sheet {sheet.number} of {sheet.count}",
        f"Plan view with mount zones, schedule of rooms and cautions; {sheet.paper}, scale {sheet.scale}.",
        (
            *page.groups,
            Group("cautions", tuple(caution_items(layout.cautions, cautions))),
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
