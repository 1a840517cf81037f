"""What every sheet has: its frame, cautions and title block around the page's own groups; and pages of schedule."""

from collections import Counter
from collections.abc import Iterator, Sequence
from dataclasses import dataclass

from kernelscan.coverage import RoomZones
from kernelscan.coverage.wording import Custom
from kernelscan.markup.layout import Layout, schedule_layout
from kernelscan.markup.legend import caution_items, legend_items
from kernelscan.markup.options import SheetOptions
from kernelscan.markup.paper import Paper, Scale
from kernelscan.markup.scene import Box, Group, Item, Scene, Stroke
from kernelscan.markup.schedule import Entry, Schedule
from kernelscan.markup.style import FRAME_PEN, RULE_PEN
from kernelscan.markup.text import clean_text
from kernelscan.markup.titleblock import SheetNumber, title_block
from kernelscan.plain_text import plain_text
from kernelscan.plan import Plan

__all__ = ["Page", "about_the_drawing", "finished", "legend_group", "schedule_group", "schedule_pages"]

COLUMN_GAP = 4.0
"""Between two columns of a schedule sheet, in millimetres."""


@dataclass(frozen=True, slots=True)
class Page:
    """What is particular to one sheet: its layout, its scale in words and its own groups."""

    layout: Layout
    scale: str
    groups: tuple[Group, ...]


def finished(
    plan: Plan, options: SheetOptions, pages: Sequence[Page], extra: Sequence[str]
) -> tuple[Scene, ...]:
    """Return the pages as numbered sheets."""
    return tuple(
        _sheet(
            plan, options, page, extra, SheetNumber(number, len(pages), page.layout.paper.name, page.scale)
        )
        for number, page in enumerate(pages, 1)
    )


def legend_group(layout: Layout, scale: Scale, custom: Custom) -> Group:
    """Return the scale bar and the legend."""
    return Group("legend", tuple(legend_items(layout.legend, scale, custom.imperial)))


def schedule_pages(schedule: Schedule, first: Layout, extra: Sequence[str]) -> Iterator[Page]:
    """Yield the sheets that carry what of the schedule the first sheet does not hold."""
    layout = schedule_layout(first.paper, extra)
    for columns in _pages(schedule, schedule.fitting(0, first.schedule.height), layout):
        yield Page(layout, "none", (schedule_group(schedule, layout.schedule, columns),))


def about_the_drawing(plan: Plan, answers: Sequence[RoomZones]) -> tuple[str, ...]:
    """Return what must be said of this drawing in particular."""
    lines = [f"How rooms were found: {plain_text(plan.room_rule, 400)}"] if plan.room_rule else []
    if not answers:
        lines.append("No closed room was found in this drawing: nothing is marked.")
    met = Counter(clean_text(problem.code) for problem in plan.problems)
    if met:
        kinds = ", ".join(f"{code} ({count})" for code, count in sorted(met.items()))
        lines.append(f"Met in the drawing, and told in the report: {kinds}.")
    return tuple(lines)


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


def _sheet(plan: Plan, options: SheetOptions, page: Page, extra: Sequence[str], sheet: SheetNumber) -> Scene:
    file, layout = clean_text(plan.file), page.layout
    return Scene(
        layout.paper.width,
        layout.paper.height,
        f"{file}: where one device sees every wall, sheet {sheet.number} of {sheet.count}",
        f"Plan view with mount zones, schedule of rooms and cautions; {sheet.paper}, scale {sheet.scale}.",
        (
            *page.groups,
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
