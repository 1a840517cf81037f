"""The pen of the DXF mark-up: draws from metres on our own layers of one drawing, in its unit."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from math import degrees
from typing import TYPE_CHECKING, Any

import numpy as np
from numpy.typing import ArrayLike

from kernelscan.coverage.wording import Custom
from kernelscan.markup.dimensions import Length
from kernelscan.markup.dxf_blocks import DIMENSION_STYLE, Fields, Sizes, block_of, tried_block
from kernelscan.markup.paper import Scale
from kernelscan.markup.shown import ShownSpot
from kernelscan.markup.style import Mark
from kernelscan.markup.tags import Placement
from kernelscan.markup.text import clean_text
from kernelscan.markup.view import PlanView
from kernelscan.units import Unit, feet_and_inches

if TYPE_CHECKING:
    from ezdxf.document import Drawing
    from ezdxf.entities.insert import Insert

__all__ = ["TAG_SCALE", "DxfPen"]

TAG_SCALE = Scale(100.0, "1:100")
"""Of the sheet whose texts, symbols and hatches the drawing has."""


@dataclass(frozen=True, slots=True, eq=False)
class DxfPen:
    """Draws in the model space of one drawing, from metres."""

    drawing: "Drawing"
    prefix: str
    unit: Unit

    @property
    def custom(self) -> Custom:
        """How lengths are read."""
        return Custom(self.unit.imperial)

    def drawn(self, points: ArrayLike) -> list[tuple[float, float]]:
        """Return ``(n, 2)`` metres as points of the drawing."""
        placed = np.asarray(points, dtype=float).reshape(-1, 2) / self.unit.metres
        return [(float(x), float(y)) for x, y in placed]

    def ring(self, minor: str, ring: ArrayLike) -> None:
        """Draw a closed line."""
        self.drawing.modelspace().add_lwpolyline(self.drawn(ring), close=True, dxfattribs=self._on(minor))

    def line(self, minor: str, ends: ArrayLike, **attributes: Any) -> None:  # noqa: ANN401 - of any kind
        """Draw a line between two points."""
        start, end = self.drawn(ends)
        self.drawing.modelspace().add_line(start, end, dxfattribs=self._on(minor, **attributes))

    def point(self, minor: str, at: ArrayLike) -> None:
        """Draw a point."""
        self.drawing.modelspace().add_point(self.drawn(at)[0], dxfattribs=self._on(minor))

    def hatched(self, minor: str, rings: Sequence[np.ndarray], mark: Mark) -> None:
        """Draw an area: its borders, and a hatch of lines at the kind's own angle and spacing."""
        spacing = mark.spacing * TAG_SCALE.denominator / 1000 / self.unit.metres
        turn = np.radians(mark.angle + 90)
        across = (float(spacing * np.cos(turn)), float(spacing * np.sin(turn)))
        hatch = self.drawing.modelspace().add_hatch(dxfattribs=self._on(minor))
        hatch.set_pattern_fill(
            f"KSCN-{mark.letter}",
            color=256,
            pattern_type=2,
            definition=[[mark.angle, (0.0, 0.0), across, []]],
        )
        for i, ring in enumerate(rings):
            self.ring(minor, ring)
            hatch.paths.add_polyline_path(self.drawn(ring), is_closed=True, flags=1 if i == 0 else 16)

    def spot(self, minor: str, spot: ShownSpot, fields: Fields, values: Mapping[str, str]) -> None:
        """Put the block of a spot at its point, turned to its bearing, with its attributes."""
        name = block_of(self.drawing, spot, 1 / self.unit.metres, fields)
        turned = self._on(minor, rotation=degrees(spot.bearing or 0.0))
        at = self.drawn(spot.point)[0]
        self._attach(self.drawing.modelspace().add_blockref(name, at, dxfattribs=turned), values)

    def tried(self, at: ArrayLike, values: Mapping[str, str]) -> None:
        """Put the block of a best point tried."""
        name = tried_block(self.drawing, 1 / self.unit.metres)
        model = self.drawing.modelspace()
        self._attach(model.add_blockref(name, self.drawn(at)[0], dxfattribs=self._on("HIDN")), values)

    def dimension(self, minor: str, length: Length) -> None:
        """Draw a length as a dimension: along the line between its points, or off a wall on the outside."""
        off = 0.0
        if length.away is not None:
            (x, y), (u, v) = length.end - length.start, length.away
            off = float(np.copysign(Sizes().stand_off / self.unit.metres, x * v - y * u))
        start, end = self.drawn([length.start, length.end])
        metres = float(np.hypot(*(length.end - length.start)))
        words = feet_and_inches(metres) if self.unit.imperial else "<>"
        attributes = self._on(minor)
        dimension = self.drawing.modelspace().add_aligned_dim(
            start, end, off, text=words, dimstyle=DIMENSION_STYLE, dxfattribs=attributes
        )
        dimension.render()

    def tag(self, placement: Placement, view: PlanView) -> None:
        """Draw a tag as MTEXT, and its leader as a line."""
        lines, middle = placement.label.lines, view.to_plan(placement.box.centre)
        height = lines[0].height / TAG_SCALE.mm_per_metre / self.unit.metres
        self.drawing.modelspace().add_mtext(
            "\\P".join(_harmless_mtext(line.string) for line in lines),
            dxfattribs=self._on("TEXT", char_height=height, insert=self.drawn(middle)[0], attachment_point=5),
        )
        if placement.foot is not None:
            self.line("TEXT", [view.to_plan(placement.foot), view.to_plan(placement.leader_end)])

    def _on(self, minor: str, **attributes: Any) -> dict[str, Any]:  # noqa: ANN401
        """Return the attributes of an entity on one of our layers."""
        return {"layer": f"{self.prefix}-{minor}", **attributes}

    def _attach(self, insert: "Insert", values: Mapping[str, str]) -> None:
        insert.add_auto_attribs({name: _harmless(value) for name, value in values.items()})
        for attribute in insert.attribs:
            attribute.dxf.layer = f"{self.prefix}-TEXT"
            attribute.dxf.rotation = 0.0


def _harmless(text: str) -> str:
    """Return text that no CAD program takes for a code: a caret or a doubled percent sign begins one."""
    return clean_text(text).replace("^", "^ ").replace("%%", "% %")


def _harmless_mtext(text: str) -> str:
    """Return text for MTEXT, where the backslash and braces are codes as well."""
    return "".join(f"\\{sign}" if sign in "\\{}" else sign for sign in _harmless(text))
