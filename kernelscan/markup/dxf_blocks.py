"""Layers, line type, hatches and blocks of the DXF mark-up: all by names of our own, so that nothing is overwritten.

Layer names follow the form of the national CAD standard: discipline, major and minor group. The prefix stands for the
first two and may be changed; the minor group says what lies on the layer.
"""

from dataclasses import dataclass
from math import cos, degrees, sin
from typing import TYPE_CHECKING

from kernelscan.markup.shown import ShownSpot
from kernelscan.markup.style import BLACK, MARKS, PALE
from kernelscan.units import Unit

if TYPE_CHECKING:
    from ezdxf.document import Drawing
    from ezdxf.layouts.blocklayout import BlockLayout

__all__ = [
    "DEVICE_FIELDS",
    "DIMENSION_STYLE",
    "LAYERS",
    "OWN",
    "POINT_FIELDS",
    "PREFIX",
    "TRIED_FIELDS",
    "Fields",
    "Sizes",
    "block_of",
    "set_up",
    "tried_block",
]

PREFIX = "A-KSCN"

LAYERS: dict[str, tuple[str, int, str]] = {
    "ROOM": (BLACK, 50, "outlines of the rooms as they were read"),
    "OBST": (PALE, 35, "obstacles in the rooms"),
    "CEIL": (MARKS["ceiling"].ink, 25, "ceiling zones"),
    "WALL": (MARKS["wall"].ink, 25, "wall zones"),
    "CORN": (MARKS["corner"].ink, 25, "corner zones"),
    "STND": (MARKS["floor"].ink, 25, "zones of stands on the floor"),
    "PNTS": (BLACK, 35, "recommended points"),
    "DEVC": (BLACK, 35, "devices at their points, and their aims"),
    "CNFL": (BLACK, 100, "walls that exclude each other"),
    "HIDN": (BLACK, 25, "best points tried where none sees every wall, and the floor they miss"),
    "FEAT": (BLACK, 18, "small features that were left out"),
    "DIMS": (BLACK, 25, "setting-out dimensions"),
    "TEXT": (BLACK, 18, "tags"),
}
"""Minor group of each layer: ink, line weight in hundredths of a millimetre, description."""

OWN = "KSCN-"
"""What the names of our blocks, line types and dimension styles begin with."""
DASHED = f"{OWN}DASHED"
DIMENSION_STYLE = f"{OWN}SET-OUT"
Fields = tuple[str, ...]
POINT_FIELDS: Fields = ("TAG", "ROOM", "NAME", "FIELD", "RANGE", "TOLERANCE")
DEVICE_FIELDS: Fields = (
    "TAG", "ROOM", "NAME", "DEVICE", "KIND", "FIXING", "FIELD", "AIM", "TILT", "HEIGHT", "RANGE", "DENSITY",
    "TOLERANCE", "SETOUT", "REMARK",
)  # fmt: skip
TRIED_FIELDS: Fields = ("TAG", "ROOM", "NAME", "REMARK")
"""Attributes of a recommended point, of a device and of a best point tried; all but the tag are hidden."""


@dataclass(frozen=True, slots=True)
class Sizes:
    """Sizes in the building, in metres: those that a sheet at 1:100 has on paper."""

    text: float = 0.25
    symbol: float = 0.22
    band: float = 0.18
    corner: float = 0.50
    aim: float = 0.80
    dash: float = 0.30
    gap: float = 0.10
    stand_off: float = 0.90


def set_up(drawing: "Drawing", prefix: str, unit: Unit) -> None:
    """Make the layers, the line type and the dimension style in a drawing of a unit."""
    metre = 1 / unit.metres
    dash = Sizes().dash * metre
    drawing.linetypes.add(DASHED, [1.5 * dash, dash, -0.5 * dash], description="Kernelscan dashed __ __ __")
    for minor, (ink, weight, description) in LAYERS.items():
        layer = drawing.layers.add(f"{prefix}-{minor}")
        if ink != BLACK:
            red, green, blue = (int(ink[i : i + 2], 16) for i in (1, 3, 5))
            layer.rgb = red, green, blue
        layer.dxf.lineweight = weight
        layer.description = description
    drawing.layers.get(f"{prefix}-CNFL").dxf.linetype = DASHED
    _dimension_style(drawing, unit)


def _dimension_style(drawing: "Drawing", unit: Unit) -> None:
    """Make the style of the dimensions: whole millimetres; feet and inches are written out by each dimension."""
    text, gap = Sizes().text / unit.metres, Sizes().gap / unit.metres
    drawing.dimstyles.new(
        DIMENSION_STYLE,
        dxfattribs={
            "dimtxt": text,
            "dimasz": text,
            "dimexo": gap,
            "dimexe": gap,
            "dimgap": gap,
            "dimtad": 1,
            "dimdec": 0,
            "dimrnd": 0,
            "dimlfac": 1000 * unit.metres,
        },
    )


def block_of(drawing: "Drawing", spot: ShownSpot, metre: float, fields: Fields) -> str:
    """Return the name of the block for a spot, made when it is first asked for: one for each field of view."""
    angle = round(degrees(spot.field))
    name = "KSCN-" + ("DEVICE-" if fields is DEVICE_FIELDS else "") + MARKS[spot.fixing].word.upper()
    name += f"-{angle:03}" if spot.fixing == "corner" else ""
    if name not in drawing.blocks:
        block = drawing.blocks.new(name)
        _draw_sector(block, spot.bearing is None, spot.field, metre)
        _define(block, fields, metre)
    return name


def tried_block(drawing: "Drawing", metre: float) -> str:
    """Return the name of the block for a best point tried: a square on its corner."""
    if "KSCN-TRIED" not in drawing.blocks:
        block, radius = drawing.blocks.new("KSCN-TRIED"), Sizes().symbol * metre
        block.add_lwpolyline([(radius, 0), (0, radius), (-radius, 0), (0, -radius)], close=True)
        block.add_point((0, 0))
        _define(block, TRIED_FIELDS, metre)
    return "KSCN-TRIED"


def _draw_sector(block: "BlockLayout", all_round: bool, field: float, metre: float) -> None:
    """Draw a symbol about the origin, its bearing along x, on layer 0, so that it takes the layer it is put on."""
    for radius in (Sizes().symbol * metre, 0.45 * Sizes().symbol * metre):
        if all_round:
            block.add_circle((0, 0), radius)
        else:
            half = field / 2
            block.add_arc((0, 0), radius, -degrees(half), degrees(half))
            block.add_line((0, 0), (radius * cos(half), -radius * sin(half)))
            block.add_line((0, 0), (radius * cos(half), radius * sin(half)))
    block.add_point((0, 0))


def _define(block: "BlockLayout", fields: Fields, metre: float) -> None:
    """Give a block its attributes, beside the symbol and one under the other."""
    from ezdxf.enums import TextEntityAlignment

    for i, name in enumerate(fields):
        height = Sizes().text * metre
        place = (Sizes().symbol * metre + height, -i * 1.7 * height)
        hidden = {} if i == 0 else {"flags": 1}
        definition = block.add_attdef(name, dxfattribs={"height": height, **hidden})
        definition.set_placement(place, align=TextEntityAlignment.MIDDLE_CENTER)
