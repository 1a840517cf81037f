"""The mark-up within a copy of the drawing itself: our layers added, and no entity of the drawing touched.

The drawing comes opened, as the reading has it; it is changed in memory and returned as bytes, so that the file on
disk stays as it is. A drawing older than R2010 is written as R2010, which it needs for hatches and true colours.
"""

import io
from collections.abc import Iterator, Sequence
from typing import TYPE_CHECKING

from kernelscan.coverage import RoomAnswer
from kernelscan.errors import InputError
from kernelscan.markup.dxf import checked_prefix, draw_rooms
from kernelscan.markup.dxf_blocks import OWN, PREFIX, set_up
from kernelscan.markup.dxf_pen import DxfPen
from kernelscan.plan import Plan

if TYPE_CHECKING:
    from ezdxf.document import Drawing

__all__ = ["merged_dxf"]

R2010 = "AC1024"


def merged_dxf(drawing: "Drawing", plan: Plan, answers: Sequence[RoomAnswer], prefix: str = PREFIX) -> bytes:
    """Return a drawing with the mark-up in its model space, as the bytes of a DXF file.

    Parameters
    ----------
    drawing
        As it was opened; it is changed.
    plan, answers, prefix
        As for the mark-up on its own; the plan is what was read from this very drawing.

    Raises
    ------
    InputError
        When the drawing has mark-up of ours already, or the prefix cannot be part of a layer's name.
    """
    checked_prefix(prefix)
    there = next(_of_our_own(drawing, prefix), None)
    if there is not None:
        raise InputError(
            f"{plan.file}: has {there} already; merge into the drawing as it was before the mark-up"
        )
    drawing.dxfversion = max(drawing.dxfversion, R2010)
    set_up(drawing, prefix, plan.unit)
    draw_rooms(DxfPen(drawing, prefix, plan.unit), plan, answers)
    text = io.StringIO()
    drawing.write(text)
    return drawing.encode(text.getvalue())


def _of_our_own(drawing: "Drawing", prefix: str) -> Iterator[str]:
    """Yield what of the drawing has a name that the mark-up would take."""
    own = OWN.casefold()
    yield from (
        f"layer {layer.dxf.name}"
        for layer in drawing.layers
        if layer.dxf.name.casefold().startswith(f"{prefix}-".casefold())
    )
    yield from (f"block {block.name}" for block in drawing.blocks if block.name.casefold().startswith(own))
    yield from (
        f"line type {each.dxf.name}" for each in drawing.linetypes if each.dxf.name.casefold().startswith(own)
    )
    yield from (
        f"dimension style {each.dxf.name}"
        for each in drawing.dimstyles
        if each.dxf.name.casefold().startswith(own)
    )
