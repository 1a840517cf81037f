"""How a sheet is divided: the plan, the schedule, the legend, the cautions and the title block.

The title block is always at the lower right (ISO 7200). In the arrangement "column" the blocks stand above it, at the
right of the plan; in "corner" only the schedule does, and the others lie under the plan; in "foot" all lie in a band
under the plan, side by side where the width allows.
"""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass

from kernelscan.markup.legend import Legend, cautions_height
from kernelscan.markup.paper import Paper
from kernelscan.markup.scene import Box
from kernelscan.markup.schedule import Schedule
from kernelscan.markup.titleblock import TITLE_HEIGHT, TITLE_WIDTH

__all__ = ["CAPTION", "MARGIN", "Blocks", "Layout", "arrangements", "schedule_layout"]

GAP = 2.0
"""Between two blocks, in millimetres."""
MARGIN = 14.0
"""Kept free on each side of the rooms for letters and leaders."""
CAPTION = 6.0
"""Strip under the plan for its caption."""
NARROWEST = 60.0
"""A plan gets at least this width and height."""


@dataclass(frozen=True, slots=True)
class Blocks:
    """What the blocks beside a plan hold: the schedule, the legend, and the paragraphs of the cautions."""

    schedule: Schedule
    legend: Legend
    cautions: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class Layout:
    """The blocks of one sheet, in millimetres of paper.

    Attributes
    ----------
    paper
        As it lies on the table.
    plan, schedule, legend, cautions, title
        The blocks; a schedule's box is the space it may use, and a block of no area is left out.
    """

    paper: Paper
    plan: Box
    schedule: Box
    legend: Box
    cautions: Box
    title: Box

    @property
    def space(self) -> tuple[float, float]:
        """Width and height for the rooms themselves."""
        return self.plan.width - 2 * MARGIN, self.plan.height - 2 * MARGIN - CAPTION


def arrangements(paper: Paper, blocks: Blocks) -> Iterator[Layout]:
    """Yield the ways to arrange the blocks on a sheet."""
    for beside in (_column, _corner):
        layout = beside(paper, blocks)
        if layout is not None:
            yield layout
    for band in _bands(paper, blocks):
        for with_schedule in (True, False):
            foot = _foot(paper, band, blocks.schedule if with_schedule else None)
            if foot is not None:
                yield foot


def _column(paper: Paper, blocks: Blocks) -> Layout | None:
    frame, width = paper.frame, max(TITLE_WIDTH, blocks.schedule.width)
    left = frame.right - width
    title = Box(left, frame.bottom, frame.right, frame.bottom + TITLE_HEIGHT)
    cautions = Box(left, title.top, frame.right, title.top + cautions_height(width, blocks.cautions))
    legend = Box(left, cautions.top, frame.right, cautions.top + blocks.legend.height(width))
    plan = Box(frame.left, frame.bottom, left - GAP, frame.top)
    if legend.top > frame.top or plan.width < NARROWEST:
        return None
    return Layout(paper, plan, Box(left, legend.top, frame.right, frame.top), legend, cautions, title)


def _corner(paper: Paper, blocks: Blocks) -> Layout | None:
    frame = paper.frame
    left = frame.right - max(TITLE_WIDTH, blocks.schedule.width)
    title = Box(left, frame.bottom, frame.right, frame.bottom + TITLE_HEIGHT)
    width = left - GAP - frame.left
    if width < NARROWEST:
        return None
    cautions = Box(
        frame.left, frame.bottom, left - GAP, frame.bottom + cautions_height(width, blocks.cautions)
    )
    legend = Box(frame.left, cautions.top, left - GAP, cautions.top + blocks.legend.height(width))
    plan = Box(frame.left, legend.top, left - GAP, frame.top)
    if plan.height < NARROWEST:
        return None
    return Layout(paper, plan, Box(left, title.top, frame.right, frame.top), legend, cautions, title)


@dataclass(frozen=True, slots=True)
class _Band:
    """The blocks under a plan, and how high they reach together."""

    title: Box
    cautions: Box
    legend: Box
    top: float


def _bands(paper: Paper, blocks: Blocks) -> Iterator[_Band]:
    """Yield the ways to lay title block, cautions and legend in a band at the foot of a sheet."""
    frame = paper.frame
    left, bottom, right = frame.left, frame.bottom, frame.right
    title = Box(max(left, right - TITLE_WIDTH), bottom, right, bottom + TITLE_HEIGHT)
    beside, width = title.left - GAP - left, frame.width
    high = title.top + cautions_height(width, blocks.cautions)
    cautions = Box(left, title.top, right, high)
    yield _Band(
        title,
        cautions,
        Box(left, high, right, high + blocks.legend.height(width)),
        high + blocks.legend.height(width),
    )
    if beside >= 85 and blocks.legend.height(beside) <= TITLE_HEIGHT:
        yield _Band(title, cautions, Box(left, bottom, left + beside, title.top), high)
    if beside >= 120:
        low = bottom + cautions_height(beside, blocks.cautions)
        legend = Box(left, low, left + beside, low + blocks.legend.height(beside))
        yield _Band(title, Box(left, bottom, left + beside, low), legend, max(title.top, legend.top))


def _foot(paper: Paper, band: _Band, schedule: Schedule | None) -> Layout | None:
    frame, top = paper.frame, band.top
    space = Box(frame.left, top, frame.left, top)
    if schedule is not None:
        if schedule.width > frame.width:
            return None
        space = Box(frame.left, top, frame.left + schedule.width, top + schedule.height(schedule.entries))
        top = space.top
    plan = Box(frame.left, top, frame.right, frame.top)
    if plan.height < NARROWEST:
        return None
    return Layout(paper, plan, space, band.legend, band.cautions, band.title)


def schedule_layout(paper: Paper, cautions: Sequence[str]) -> Layout:
    """Return the layout of a sheet that carries nothing but the schedule, cautions and title block."""
    frame = paper.frame
    title = Box(
        max(frame.left, frame.right - TITLE_WIDTH), frame.bottom, frame.right, frame.bottom + TITLE_HEIGHT
    )
    below = Box(frame.left, title.top, frame.right, title.top + cautions_height(frame.width, cautions))
    none = Box(frame.left, frame.bottom, frame.left, frame.bottom)
    return Layout(paper, none, Box(frame.left, below.top, frame.right, frame.top), none, below, title)
