"""DXF: the same mark-up for CAD, in the position and the unit of the drawing it was made from.

Coordinates are the plan's metres divided by the drawing's unit, so that the file lies exactly over the original when
it is attached as an external reference. Only layers, blocks, hatches and a line type of our own are in it. Tags stand
where a sheet at 1:100 would have them. R2010, written without a clock: the same answers give the same text.
"""

import io
from collections.abc import Iterator, Sequence
from contextlib import contextmanager
from dataclasses import dataclass
from math import degrees
from typing import TYPE_CHECKING, Any

import numpy as np
from numpy.typing import ArrayLike

from kernelscan.coverage import RoomZones, Spot, WallZone
from kernelscan.coverage.wording import Custom, angle_in_words
from kernelscan.errors import InputError
from kernelscan.markup.drawing import band_ring, conflict_walls
from kernelscan.markup.dxf_blocks import PREFIX, Sizes, block_of, set_up
from kernelscan.markup.paper import Scale
from kernelscan.markup.scene import Box
from kernelscan.markup.style import MARKS, Mark
from kernelscan.markup.symbols import sector
from kernelscan.markup.tags import Placement, placed_tags
from kernelscan.markup.text import clean_text
from kernelscan.markup.view import PlanView, plan_extent
from kernelscan.plan import Plan
from kernelscan.units import HEADER_UNITS

if TYPE_CHECKING:
    from ezdxf.document import Drawing

__all__ = ["zones_dxf"]

TAG_SCALE = Scale(100.0, "1:100")


def zones_dxf(plan: Plan, answers: Sequence[RoomZones], prefix: str = PREFIX) -> str:
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

    _checked(prefix)
    with _fixed_dates():
        drawing = new("R2010")
        _head(drawing, plan)
        set_up(drawing, prefix, 1 / plan.unit.metres)
        pen = _Pen(drawing, prefix, plan.unit.metres, Custom(plan.unit.imperial))
        for zones in answers:
            pen.room(zones)
        for tag in _tags(plan, answers, pen.custom):
            pen.tag(*tag)
        stream = io.StringIO()
        drawing.write(stream)
    return stream.getvalue()


def _checked(prefix: str) -> None:
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


def _tags(plan: Plan, answers: Sequence[RoomZones], custom: Custom) -> Iterator[tuple[Placement, PlanView]]:
    """Yield the tags of a sheet without borders at 1:100; the letters of points are attributes of their blocks."""
    extent = plan_extent(plan, [zones.room for zones in answers])
    width, height = ((side * TAG_SCALE.mm_per_metre + 200) / 2 for side in (extent.width, extent.height))
    view = PlanView(Box(-width, -height, width, height), TAG_SCALE, extent.centre)
    letters = {mark.letter for mark in MARKS.values()}
    for placement in placed_tags(answers, view, custom).placements:
        if placement.label.lines[0].string not in letters or placement.foot is not None:
            yield placement, view


def _harmless(text: str) -> str:
    """Return text that no CAD program takes for a code: a caret or a doubled percent sign begins one."""
    return clean_text(text).replace("^", "^ ").replace("%%", "% %")


def _harmless_mtext(text: str) -> str:
    """Return text for MTEXT, where the backslash and braces are codes as well."""
    return "".join(f"\\{sign}" if sign in "\\{}" else sign for sign in _harmless(text))


@dataclass(frozen=True, slots=True, eq=False)
class _Pen:
    """Draws in the model space of one drawing, from metres."""

    drawing: "Drawing"
    prefix: str
    unit: float
    custom: Custom

    def on(self, minor: str, **attributes: Any) -> dict[str, Any]:  # noqa: ANN401 - attributes of any kind
        """Return the attributes of an entity on one of our layers."""
        return {"layer": f"{self.prefix}-{minor}", **attributes}

    def drawn(self, points: ArrayLike) -> list[tuple[float, float]]:
        """Return ``(n, 2)`` metres as points of the drawing."""
        return [(float(x), float(y)) for x, y in np.asarray(points, dtype=float).reshape(-1, 2) / self.unit]

    def room(self, zones: RoomZones) -> None:
        """Draw a room and all that is known of it."""
        model = self.drawing.modelspace()
        model.add_lwpolyline(self.drawn(zones.room.outline), close=True, dxfattribs=self.on("ROOM"))
        for hole in zones.room.holes:
            model.add_lwpolyline(self.drawn(hole), close=True, dxfattribs=self.on("OBST"))
        self._ceiling(zones)
        for wall in zones.walls:
            self._wall(zones, wall)
        for corner in zones.corners:
            spot = corner.spot
            ring = sector((0.0, 0.0), 1.0, spot.bearing, spot.field_of_view)
            self._hatched("CORN", np.array(ring) * Sizes().corner + spot.point, MARKS["corner"])
        for wall_ref in conflict_walls(zones):
            self._line(np.array(zones.room.wall_ends(wall_ref)), "CNFL")
        for spot in zones.recommended:
            self._point(zones, spot)

    def _ceiling(self, zones: RoomZones) -> None:
        if zones.ceiling is None:
            return
        model, vertices = self.drawing.modelspace(), zones.ceiling.vertices
        if len(vertices) >= 3:
            self._hatched("CEIL", vertices, MARKS["ceiling"])
        elif len(vertices) == 2:
            self._line(vertices, "CEIL", lineweight=70)
        else:
            model.add_point(self.drawn(vertices)[0], dxfattribs=self.on("CEIL"))

    def _wall(self, zones: RoomZones, wall: WallZone) -> None:
        if wall.length > 0:
            self._hatched("WALL", band_ring(zones.room, wall, Sizes().band), MARKS["wall"])
        else:
            self.drawing.modelspace().add_point(self.drawn(wall.path)[0], dxfattribs=self.on("WALL"))

    def _line(self, ends: ArrayLike, minor: str, **attributes: Any) -> None:  # noqa: ANN401
        start, end = self.drawn(ends)
        self.drawing.modelspace().add_line(start, end, dxfattribs=self.on(minor, **attributes))

    def _hatched(self, minor: str, ring: np.ndarray, mark: Mark) -> None:
        """Draw an area: its border, and a hatch of lines at the kind's own angle and spacing."""
        model, points = self.drawing.modelspace(), self.drawn(ring)
        model.add_lwpolyline(points, close=True, dxfattribs=self.on(minor))
        spacing = mark.spacing * TAG_SCALE.denominator / 1000 / self.unit
        hatch = model.add_hatch(dxfattribs=self.on(minor))
        turn = np.radians(mark.angle + 90)
        across = (float(spacing * np.cos(turn)), float(spacing * np.sin(turn)))
        hatch.set_pattern_fill(
            f"KSCN-{mark.letter}",
            color=256,
            pattern_type=2,
            definition=[[mark.angle, (0.0, 0.0), across, []]],
        )
        hatch.paths.add_polyline_path(points, is_closed=True)

    def _point(self, zones: RoomZones, spot: Spot) -> None:
        mark, metre = MARKS[spot.mount], 1 / self.unit
        insert = self.drawing.modelspace().add_blockref(
            block_of(self.drawing, spot, metre),
            self.drawn(spot.point)[0],
            dxfattribs=self.on("PNTS", rotation=degrees(spot.bearing or 0.0)),
        )
        insert.add_auto_attribs({
            "TAG": mark.letter,
            "ROOM": _harmless(zones.room.id),
            "NAME": _harmless(zones.room.name),
            "FIELD": angle_in_words(spot.field_of_view),
            "RANGE": self.custom.range_up(spot.farthest),
            "TOLERANCE": self.custom.tolerance_down(spot.tolerance),
        })  # fmt: skip
        for attribute in insert.attribs:
            attribute.dxf.layer = f"{self.prefix}-TEXT"
            attribute.dxf.rotation = 0.0

    def tag(self, placement: Placement, view: PlanView) -> None:
        """Draw a tag as MTEXT, and its leader as a line."""
        lines, middle = placement.label.lines, view.to_plan(placement.box.centre)
        height = lines[0].height / TAG_SCALE.mm_per_metre / self.unit
        self.drawing.modelspace().add_mtext(
            "\\P".join(_harmless_mtext(line.string) for line in lines),
            dxfattribs=self.on("TEXT", char_height=height, insert=self.drawn(middle)[0], attachment_point=5),
        )
        if placement.foot is not None:
            self._line([view.to_plan(placement.foot), view.to_plan(placement.leader_end)], "TEXT")
