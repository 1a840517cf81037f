"""Which paper, which scale, and how many sheets.

1. Papers are tried from small to large, each both ways round and with every arrangement of the blocks. On each, the
   largest usual scale is found at which all rooms fit with a margin for leaders; among the ways that give the same
   scale, the one that holds most of the schedule goes first, then the one with the largest space for the plan.
2. Of the two smallest papers (A4 and A3, or letter and ANSI B: what an office printer takes) the first wins that
   is legible and holds the whole schedule. Legible is a scale at which a square room of the rooms' mean area is at
   least 30 mm across.
3. Else the first paper of all wins that is legible; else the one with the largest scale, and of several the smallest.
4. Where the scale that was asked for does not fit, or none that fits is legible, the plan is shown in parts: an
   overview at the scale that fits, and a sheet for each part on the same paper, at the scale that was asked for or at
   the smallest legible one; where that would take more than 24 parts, at the next smaller ones.
"""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from itertools import takewhile
from math import ceil, inf

import numpy as np

from kernelscan.errors import InputError
from kernelscan.markup.layout import Blocks, Layout, arrangements
from kernelscan.markup.options import SheetOptions
from kernelscan.markup.paper import (
    ANSI_PAPERS,
    ISO_PAPERS,
    Paper,
    Scale,
    largest_scale,
    paper_by_name,
    scale_by_text,
    usual_scales,
)
from kernelscan.markup.scene import Box
from kernelscan.markup.schedule import Schedule
from kernelscan.plan import Room

__all__ = ["Choice", "Parts", "chosen"]

LEGIBLE = 30.0
"""How wide a room of the mean area shall at least be on paper, in millimetres."""
MOST_PARTS, MOST_PARTS_UNASKED = 200, 24


@dataclass(frozen=True, slots=True)
class Parts:
    """A plan in parts: columns from left to right and rows from top to bottom, each on a sheet of one layout."""

    layout: Layout
    scale: Scale
    columns: int
    rows: int


@dataclass(frozen=True, slots=True)
class Choice:
    """The layout and scale of the plan's sheet, and the parts that follow where it is only an overview."""

    layout: Layout
    scale: Scale
    parts: Parts | None = None


def chosen(
    extent: Box, rooms: Sequence[Room], blocks: Blocks, options: SheetOptions, imperial: bool
) -> Choice:
    """Return the sheets for a plan, by the rules at the head of this module.

    Parameters
    ----------
    extent
        The box around the plan, in metres.
    rooms, blocks
        What is to be shown.
    options
        Paper and scale, where they are given.
    imperial
        Whether papers and scales are those of feet and inches.

    Raises
    ------
    InputError
        When a paper or a scale does not exist, or the scale that was asked for would take more than 200 parts.
    """
    asked = scale_by_text(options.scale) if options.scale else None
    width = float(np.sqrt(np.mean([room.area for room in rooms]))) if rooms else inf
    least = LEGIBLE / width
    found = [_best_on(paper, extent, blocks, asked, imperial) for paper in _papers(options, imperial)]
    fitting = [each for each in found if each is not None]
    good = [each for each in fitting if asked or each.scale.mm_per_metre >= least]
    handy = [each for each in fitting[:2] if each in good and blocks.schedule.fits(each.layout.schedule)]
    if handy or good:
        return (handy or good)[0]
    overviews = [_best_on(paper, extent, blocks, None, imperial) for paper in _papers(options, imperial)]
    overview = min(filter(None, overviews), key=lambda choice: choice.scale.denominator, default=None)
    if overview is None:
        raise InputError(f"paper: {options.paper} has no room for the plan beside its title block")
    if asked:
        return replace(overview, parts=_asked_parts(overview.layout.paper, extent, blocks, asked))
    return replace(overview, parts=_legible_parts(overview, extent, blocks, least, imperial))


def _papers(options: SheetOptions, imperial: bool) -> tuple[Paper, ...]:
    if options.paper:
        return (paper_by_name(options.paper),)
    return ANSI_PAPERS if imperial else ISO_PAPERS


def _best_on(paper: Paper, extent: Box, blocks: Blocks, asked: Scale | None, imperial: bool) -> Choice | None:
    """Return the best choice on one paper, or ``None`` where the scale that was asked for does not fit it."""
    size = (extent.width, extent.height)
    layouts = [
        layout
        for turned in (paper, paper.turned)
        for layout in arrangements(turned, blocks)
        if min(layout.space) > 0
    ]
    choices = [Choice(layout, asked or largest_scale(size, layout.space, imperial)) for layout in layouts]
    fitting = [choice for choice in choices if _fits(size, choice)]
    return min(fitting, key=lambda choice: _merit(choice, blocks.schedule)) if fitting else None


def _merit(choice: Choice, schedule: Schedule) -> tuple[float, int, float]:
    plan = choice.layout.plan
    held = schedule.fitting(0, choice.layout.schedule.height)
    return choice.scale.denominator, -held, -plan.width * plan.height


def _fits(size: tuple[float, float], choice: Choice) -> bool:
    mm = choice.scale.mm_per_metre
    return all(each * mm <= room + 1e-9 for each, room in zip(size, choice.layout.space, strict=True))


def _asked_parts(paper: Paper, extent: Box, blocks: Blocks, scale: Scale) -> Parts:
    parts = _fewest_parts(paper, extent, blocks, scale)
    if _sheets(parts) > MOST_PARTS:
        raise InputError(
            f"scale: at {scale.text} the plan ({extent.width:.1f} by {extent.height:.1f} m) needs {_sheets(parts)} "
            f"sheets of {paper.name}; give a smaller scale or a larger paper"
        )
    return parts


def _legible_parts(
    overview: Choice, extent: Box, blocks: Blocks, least: float, imperial: bool
) -> Parts | None:
    """Return parts at the smallest legible scale, or at the next smaller ones until they are few; else none."""
    larger = takewhile(lambda scale: scale.denominator < overview.scale.denominator, usual_scales(imperial))
    scales = list(larger)
    legible = sum(scale.mm_per_metre >= least for scale in scales)
    for scale in scales[max(legible - 1, 0) :]:
        parts = _fewest_parts(overview.layout.paper, extent, blocks, scale)
        if _sheets(parts) <= MOST_PARTS_UNASKED:
            return parts
    return None


def _fewest_parts(paper: Paper, extent: Box, blocks: Blocks, scale: Scale) -> Parts:
    return min(_divisions(paper, extent, blocks, scale), key=_sheets)


def _sheets(parts: Parts) -> int:
    return parts.columns * parts.rows


def _divisions(paper: Paper, extent: Box, blocks: Blocks, scale: Scale) -> Iterator[Parts]:
    for turned in (paper, paper.turned):
        for layout in arrangements(turned, blocks):
            if min(layout.space) > 0:
                width, height = (room / scale.mm_per_metre for room in layout.space)
                yield Parts(
                    layout, scale, max(1, ceil(extent.width / width)), max(1, ceil(extent.height / height))
                )
