"""DXF: the same mark-up for CAD, in the position and the unit of the drawing it was made from.

Coordinates are the plan's metres divided by the drawing's unit, so that the file lies exactly over the original when
it is attached as an external reference. Only layers, blocks, hatches and a line type of our own are in it. Tags stand
where a sheet at 1:100 would have them. R2010, written without a clock: the same answers give the same text.
"""

import io
from collections.abc import Iterator, Sequence
from contextlib import contextmanager
from math import cos, sin
from typing import TYPE_CHECKING

import numpy as np

from kernelscan.coverage import RoomAnswer
from kernelscan.coverage.wording import Custom
from kernelscan.errors import InputError
from kernelscan.markup.dimensions import lengths_to_set_out
from kernelscan.markup.drawing import band_ring
from kernelscan.markup.dxf_blocks import DEVICE_FIELDS, POINT_FIELDS, PREFIX, Sizes, set_up
from kernelscan.markup.dxf_fields import device_points, plain_points, tried_fields
from kernelscan.markup.dxf_pen import TAG_SCALE, DxfPen
from kernelscan.markup.scene import Box
from kernelscan.markup.shown import ShownArea, ShownRoom, shown
from kernelscan.markup.style import MARKS, TRIED_LETTER
from kernelscan.markup.symbols import sector
from kernelscan.markup.tags import Placement, placed_tags
from kernelscan.markup.view import PlanView, plan_extent
from kernelscan.plan import Plan
from kernelscan.units import HEADER_UNITS

if TYPE_CHECKING:
    from ezdxf.document import Drawing

__all__ = ["checked_prefix", "draw_rooms", "zones_dxf"]


def zones_dxf(plan: Plan, answers: Sequence[RoomAnswer], prefix: str = PREFIX) -> str:
    """Return the mark-up of a plan as the text of a DXF file.

    Parameters
    ----------
    plan
        Its unit becomes the file's.
    answers
        One for each room to be shown.
    prefix
        What the names of all layers begin with.

    Raises
    ------
    InputError
        When the prefix cannot be part of a layer's name.
    """
    from ezdxf.filemanagement import new

    checked_prefix(prefix)
    with _fixed_dates():
        drawing = new("R2010")
        _head(drawing, plan)
        set_up(drawing, prefix, plan.unit)
        draw_rooms(DxfPen(drawing, prefix, plan.unit), plan, answers)
        stream = io.StringIO()
        drawing.write(stream)
    return stream.getvalue()


def draw_rooms(pen: DxfPen, plan: Plan, answers: Sequence[RoomAnswer]) -> None:
    """Draw all rooms and their tags in the model space of a drawing that has our layers."""
    rooms = [shown(answer) for answer in answers]
    for room in rooms:
        _room(pen, room)
    for tag in _tags(plan, rooms, pen.custom):
        pen.tag(*tag)


def checked_prefix(prefix: str) -> None:
    """Raise ``InputError`` where the names of layers cannot begin with this."""
    if not prefix or len(prefix) > 100 or any(sign in '<>/\\":;?*|=`,' or ord(sign) < 33 for sign in prefix):
        raise InputError(
            f"layer prefix: got {prefix!r}, expected letters, digits and hyphens, such as {PREFIX}"
        )


@contextmanager
def _fixed_dates() -> Iterator[None]:
    """Have the library write fixed dates and numbers of identity, so that the same answers give the same text."""
    from ezdxf import options  # type: ignore[attr-defined]

    before = options.write_fixed_meta_data_for_testing
    options.write_fixed_meta_data_for_testing = True
    try:
        yield
    finally:
        options.write_fixed_meta_data_for_testing = before


def _head(drawing: "Drawing", plan: Plan) -> None:
    drawing.header["$INSUNITS"] = next(code for code, unit in HEADER_UNITS.items() if unit == plan.unit)
    drawing.header["$MEASUREMENT"] = 0 if plan.unit.imperial else 1
    drawing.header["$LUNITS"] = 4 if plan.unit.name == "in" else 2


def _tags(plan: Plan, rooms: Sequence[ShownRoom], custom: Custom) -> Iterator[tuple[Placement, PlanView]]:
    """Yield the tags of a sheet without borders at 1:100; the tags of points are attributes of their blocks."""
    extent = plan_extent(plan, [room.room for room in rooms])
    width, height = ((side * TAG_SCALE.mm_per_metre + 200) / 2 for side in (extent.width, extent.height))
    view = PlanView(Box(-width, -height, width, height), TAG_SCALE, extent.centre)
    of_points = {spot.tag for room in rooms for spot in room.spots} | {TRIED_LETTER}
    for placement in placed_tags(rooms, view, custom).placements:
        if len(placement.label.lines) > 1 or placement.label.lines[0].string not in of_points:
            yield placement, view


def _room(pen: DxfPen, room: ShownRoom) -> None:
    """Draw a room and all that is shown of it."""
    pen.ring("ROOM", room.room.outline)
    for hole in room.room.holes:
        pen.ring("OBST", hole)
    for area in room.areas:
        _area(pen, area)
    for wall in room.stretches:
        if wall.length > 0:
            pen.hatched("WALL", [band_ring(room.basis.room, wall, Sizes().band)], MARKS["wall"])
        else:
            pen.point("WALL", wall.path[0])
    for nook in room.nooks:
        ring = sector((0.0, 0.0), 1.0, nook.bearing, nook.field)
        pen.hatched("CORN", [np.array(ring) * Sizes().corner + nook.point], MARKS["corner"])
    for _, feature in room.features:
        pen.ring("FEAT", feature.ring)
    for wall_ref in room.conflict:
        pen.line("CNFL", np.array(room.basis.room.wall_ends(wall_ref)))
    _points(pen, room)
    for length in lengths_to_set_out(room):
        pen.dimension("DIMS", length)


def _area(pen: DxfPen, area: ShownArea) -> None:
    minor = "STND" if area.fixing == "floor" else "CEIL"
    if len(area.rings[0]) >= 3:
        pen.hatched(minor, area.rings, MARKS[area.fixing])
    elif len(area.rings[0]) == 2:
        pen.line(minor, area.rings[0], lineweight=70)
    else:
        pen.point(minor, area.rings[0][0])


def _points(pen: DxfPen, room: ShownRoom) -> None:
    """Draw the points of a room: its own, or those of devices, and the best that was tried where there is none."""
    if room.answer.devices:
        for spot, fields in device_points(room, pen.custom):
            pen.spot("DEVC", spot, DEVICE_FIELDS, fields)
            for aim in spot.aims:
                tip = spot.point + Sizes().aim * np.array([cos(aim), sin(aim)])
                pen.line("DEVC", np.array([spot.point, tip]))
    else:
        for spot, fields in plain_points(room, pen.custom):
            pen.spot("PNTS", spot, POINT_FIELDS, fields)
    if room.tried is not None:
        for patch in room.tried.hidden.patches:
            for ring in (patch.outline, *patch.holes):
                pen.ring("HIDN", ring)
        pen.tried(room.tried.best.point, tried_fields(room, pen.custom))
