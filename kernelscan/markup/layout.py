"""How a sheet is divided: the plan, the schedule, the legend, the cautions and the title block.

The rule by which paper, orientation and scale are chosen, where they are not given:

1. Papers are tried from small to large, each both ways round and with every arrangement of the blocks below. On each,
   the largest usual scale is found at which all rooms fit with a margin for leaders; among the ways that give the
   same scale, one that holds the whole schedule goes first, then the one with the largest space for the plan.
2. Of the two smallest papers (A4 and A3, or letter and ANSI B: what an office printer takes) the first wins that
   is legible and holds the whole schedule. Legible is a scale at which a square room of the rooms' mean area is at
   least 30 mm across.
3. Else the first paper of all wins that is legible; else the one with the largest scale, and of several the smallest.

The title block is always at the lower right (ISO 7200). In the arrangement "column" the blocks stand above it, at the
right of the plan; in "corner" only the schedule does, and the others lie under the plan; in "foot" all lie in a band
under the plan, side by side where the width allows.
"""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from math import inf

import numpy as np

from kernelscan.errors import InputError
from kernelscan.markup.legend import cautions_height, legend_height
from kernelscan.markup.options import SheetOptions
from kernelscan.markup.paper import (
    ANSI_PAPERS,
    ISO_PAPERS,
    Paper,
    Scale,
    largest_scale,
    paper_by_name,
    scale_by_text,
)
from kernelscan.markup.scene import Box
from kernelscan.markup.schedule import Schedule
from kernelscan.markup.titleblock import TITLE_HEIGHT, TITLE_WIDTH
from kernelscan.plan import Room

__all__ = ["CAPTION", "Layout", "chosen_layout", "schedule_layout"]

GAP = 2.0
"""Between two blocks, in millimetres."""
MARGIN = 14.0
"""Kept free on each side of the rooms for letters and leaders."""
CAPTION = 6.0
"""Strip under the plan for its caption."""
LEGIBLE = 30.0
"""How wide a room of the mean area shall at least be on paper, in millimetres."""
NARROWEST = 60.0
"""A plan gets at least this width and height."""


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


def chosen_layout(
    extent: Box,
    rooms: Sequence[Room],
    schedule: Schedule,
    extra: Sequence[str],
    options: SheetOptions,
    imperial: bool,
) -> tuple[Layout, Scale]:
    """Return the layout of the plan's sheet and its scale, by the rule at the head of this module.

    Raises
    ------
    InputError
        When the paper or the scale that was asked for does not exist, or the plan does not fit.
    """
    size = (extent.width, extent.height)
    found = [
        best
        for paper in _papers(options, imperial)
        if (best := _best_on(paper, size, schedule, extra, options, imperial)) is not None
    ]
    if not found:
        raise InputError(
            f"scale: at {options.scale} the plan ({size[0]:.1f} by {size[1]:.1f} m) does not fit "
            f"{options.paper or 'any usual paper'}; give a smaller scale or a larger paper"
        )
    legible = [
        each for each in found if options.scale or _usual_width(rooms) * each[1].mm_per_metre >= LEGIBLE
    ]
    handy = [each for each in found[:2] if each in legible and _holds_all(each[0], schedule)]
    return (handy or legible or [min(found, key=lambda each: each[1].denominator)])[0]


def _holds_all(layout: Layout, schedule: Schedule) -> bool:
    return schedule.fitting(0, layout.schedule.height) == len(schedule.entries)


def _papers(options: SheetOptions, imperial: bool) -> tuple[Paper, ...]:
    if options.paper:
        return (paper_by_name(options.paper),)
    return ANSI_PAPERS if imperial else ISO_PAPERS


def _usual_width(rooms: Sequence[Room]) -> float:
    """Return the side of a square of the rooms' mean area, in metres; without rooms any scale will do."""
    return float(np.sqrt(np.mean([room.area for room in rooms]))) if rooms else inf


def _best_on(
    paper: Paper,
    size: tuple[float, float],
    schedule: Schedule,
    extra: Sequence[str],
    options: SheetOptions,
    imperial: bool,
) -> tuple[Layout, Scale] | None:
    found: list[tuple[float, bool, float, Layout, Scale]] = []
    for turned in (paper, paper.turned):
        for layout in _arrangements(turned, schedule, extra):
            scale = scale_by_text(options.scale) if options.scale else None
            if min(layout.space) <= 0 or (scale and not _fits(size, layout.space, scale)):
                continue
            scale = scale or largest_scale(size, layout.space, imperial)
            whole = schedule.fitting(0, layout.schedule.height) == len(schedule.entries)
            found.append(
                (scale.denominator, not whole, -layout.plan.width * layout.plan.height, layout, scale)
            )
    return min(found, key=lambda each: each[:3])[3:] if found else None


def _fits(size: tuple[float, float], space: tuple[float, float], scale: Scale) -> bool:
    return all(each * scale.mm_per_metre <= room for each, room in zip(size, space, strict=True))


def _arrangements(paper: Paper, schedule: Schedule, extra: Sequence[str]) -> Iterator[Layout]:
    for beside in (_column, _corner):
        layout = beside(paper, schedule, extra)
        if layout is not None:
            yield layout
    for band in _bands(paper, extra):
        for with_schedule in (True, False):
            foot = _foot(paper, band, schedule if with_schedule else None)
            if foot is not None:
                yield foot


def _column(paper: Paper, schedule: Schedule, extra: Sequence[str]) -> Layout | None:
    frame, width = paper.frame, max(TITLE_WIDTH, schedule.width)
    left = frame.right - width
    title = Box(left, frame.bottom, frame.right, frame.bottom + TITLE_HEIGHT)
    cautions = Box(left, title.top, frame.right, title.top + cautions_height(width, extra))
    legend = Box(left, cautions.top, frame.right, cautions.top + legend_height(width))
    plan = Box(frame.left, frame.bottom, left - GAP, frame.top)
    if legend.top > frame.top or plan.width < NARROWEST:
        return None
    return Layout(paper, plan, Box(left, legend.top, frame.right, frame.top), legend, cautions, title)


def _corner(paper: Paper, schedule: Schedule, extra: Sequence[str]) -> Layout | None:
    frame = paper.frame
    left = frame.right - max(TITLE_WIDTH, schedule.width)
    title = Box(left, frame.bottom, frame.right, frame.bottom + TITLE_HEIGHT)
    width = left - GAP - frame.left
    if width < NARROWEST:
        return None
    cautions = Box(frame.left, frame.bottom, left - GAP, frame.bottom + cautions_height(width, extra))
    legend = Box(frame.left, cautions.top, left - GAP, cautions.top + legend_height(width))
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


def _bands(paper: Paper, extra: Sequence[str]) -> Iterator[_Band]:
    """Yield the ways to lay title block, cautions and legend in a band at the foot of a sheet."""
    frame = paper.frame
    left, bottom, right = frame.left, frame.bottom, frame.right
    title = Box(max(left, right - TITLE_WIDTH), bottom, right, bottom + TITLE_HEIGHT)
    beside, width = title.left - GAP - left, frame.width
    high = title.top + cautions_height(width, extra)
    cautions = Box(left, title.top, right, high)
    yield _Band(
        title, cautions, Box(left, high, right, high + legend_height(width)), high + legend_height(width)
    )
    if beside >= 85 and legend_height(beside) <= TITLE_HEIGHT:
        yield _Band(title, cautions, Box(left, bottom, left + beside, title.top), high)
    if beside >= 120:
        low = bottom + cautions_height(beside, extra)
        legend = Box(left, low, left + beside, low + legend_height(beside))
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


def schedule_layout(paper: Paper, extra: Sequence[str]) -> Layout:
    """Return the layout of a sheet that carries nothing but the schedule, cautions and title block."""
    frame = paper.frame
    title = Box(
        max(frame.left, frame.right - TITLE_WIDTH), frame.bottom, frame.right, frame.bottom + TITLE_HEIGHT
    )
    cautions = Box(frame.left, title.top, frame.right, title.top + cautions_height(frame.width, extra))
    none = Box(frame.left, frame.bottom, frame.left, frame.bottom)
    return Layout(paper, none, Box(frame.left, cautions.top, frame.right, frame.top), none, cautions, title)
