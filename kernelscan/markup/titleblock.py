"""The title block: the fields of ISO 7200 at the lower right of every sheet, blank lines where nothing was given."""

from collections.abc import Iterator
from dataclasses import dataclass

from kernelscan.markup.options import SheetOptions
from kernelscan.markup.scene import Box, Item, Stroke, Text
from kernelscan.markup.style import BODY, HEADING, QUIET, RULE_PEN, TABLE_PEN
from kernelscan.markup.text import clean_text, cut_to
from kernelscan.plan import Plan

__all__ = ["TITLE_HEIGHT", "TITLE_WIDTH", "SheetNumber", "title_block"]

TITLE_WIDTH = 180.0
"""Widest title block of ISO 7200, and the writing width of an upright A4 sheet."""
ROWS = (10.4, 9.2, 9.2, 9.2)
"""Heights of the rows; the first is higher for the title."""
TITLE_HEIGHT = sum(ROWS)


@dataclass(frozen=True, slots=True)
class SheetNumber:
    """Which sheet of how many, on which paper, at which scale (none for a sheet without a plan)."""

    number: int
    count: int
    paper: str
    scale: str


Cell = tuple[float, str, str]
"""Share of the row's width, label, value."""


def title_block(box: Box, plan: Plan, options: SheetOptions, sheet: SheetNumber) -> tuple[Item, ...]:
    """Return the title block drawn in a box."""
    items: list[Item] = [Stroke(box.corners, RULE_PEN, closed=True)]
    top = box.top
    for height, row in zip(ROWS, _rows(plan, options, sheet), strict=True):
        if top < box.top:
            items.append(Stroke(((box.left, top), (box.right, top)), TABLE_PEN))
        items += _cells(row, Box(box.left, top - height, box.right, top))
        top -= height
    return tuple(items)


def _rows(plan: Plan, options: SheetOptions, sheet: SheetNumber) -> tuple[tuple[Cell, ...], ...]:
    chord = f"{options.tolerances.chord * 1000:g} mm"
    unit = f"{plan.unit.name} (from {'the header' if plan.unit_from == 'header' else 'an option'})"
    return (
        ((0.4, "Legal owner", options.owner), (0.6, "Title", options.title)),
        ((0.3, "Created by", options.creator), (0.3, "Approved by", options.approver),
         (0.4, "Document type", options.document_type)),
        ((0.46, "Drawing file", plan.file), (0.3, "Drawing unit", unit),
         (0.24, "Curves drawn within", chord)),
        ((0.28, "Document number", options.number), (0.2, "Date of issue", options.date),
         (0.24, "Scale", sheet.scale), (0.14, "Paper", sheet.paper),
         (0.14, "Sheet", f"{sheet.number} of {sheet.count}")),
    )  # fmt: skip


def _cells(row: tuple[Cell, ...], box: Box) -> Iterator[Item]:
    left = box.left
    for i, (share, label, value) in enumerate(row):
        width = share * box.width
        if i:
            yield Stroke(((left, box.bottom), (left, box.top)), TABLE_PEN)
        yield Text((left + 1, box.top - 3.5), cut_to(label, width - 2, BODY), BODY, ink=QUIET)
        height = HEADING if label == "Title" and len(value) < 40 else BODY
        text = cut_to(clean_text(value), width - 2, height, bold=True)
        if text:
            yield Text((left + 1, box.bottom + 1.3), text, height, bold=True)
        left += width
