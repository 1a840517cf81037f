"""The pen behind the sample drawings: walls with openings, doors, windows, furniture, room tags, dimensions.

Everything is drawn in the unit of its drawing, with layer names of the US National CAD Standard. A *face* is one
face of the walls, a closed ring of ``(x, y)`` or ``(x, y, bulge)``: every room has one, the building another.
"""

import io
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from pathlib import Path

from ezdxf import options
from ezdxf.document import Drawing
from ezdxf.enums import TextEntityAlignment
from ezdxf.filemanagement import new
from ezdxf.layouts.base import BaseLayout
from ezdxf.math import Vec2

__all__ = [
    "CENTIMETRE",
    "INCH",
    "METRE",
    "MILLIMETRE",
    "Door",
    "Pair",
    "Pen",
    "Window",
    "new_drawing",
    "offset",
    "rectangle",
    "write_drawing",
]

INCH, MILLIMETRE, CENTIMETRE, METRE = 1, 4, 5, 6  # codes of $INSUNITS

Vertex = Sequence[float]
Ring = Sequence[Vertex]
Pair = tuple[float, float]

LAYERS = {  # name: (colour index, line weight in 1/100 mm)
    "A-WALL": (7, 50),
    "A-COLS": (7, 50),
    "A-DOOR": (3, 25),
    "A-GLAZ": (4, 25),
    "A-FLOR-STRS": (8, 18),
    "I-FURN": (8, 18),
    "L-PLNT": (3, 13),
    "A-AREA": (6, 13),
    "A-AREA-IDEN": (2, 25),
    "A-ANNO-DIMS": (1, 18),
    "A-ANNO-NOTE": (2, 18),
}


@dataclass(frozen=True, slots=True)
class Window:
    """A window: its two jambs on one face of the wall, and the way through to the other face."""

    start: Pair
    end: Pair
    through: Pair


@dataclass(frozen=True, slots=True)
class Door:
    """A door, hinged at ``start``; it swings to the near side, or beyond the wall when ``away`` is set."""

    start: Pair
    end: Pair
    through: Pair
    away: bool = False
    leaves: int = 1


def new_drawing(insunits: int, *, metric: bool = True) -> Drawing:
    """Return an empty drawing in that $INSUNITS with the layers above, and without dates and random ids."""
    options.write_fixed_meta_data_for_testing = True
    doc = new("R2010", units=insunits)
    for name in (
        "ACDBPLACEHOLDER",
        "LAYOUT",
    ):  # else written in the order of a set, which differs from run to run
        doc.classes.add_class(name)
    doc.header["$MEASUREMENT"] = int(metric)
    doc.header["$LUNITS"] = 2 if metric else 4
    for name, (colour, weight) in LAYERS.items():
        doc.layers.add(name, color=colour, lineweight=weight)
    return doc


def write_drawing(doc: Drawing, path: Path) -> None:
    """Write the same bytes on every system: one kind of line end."""
    text = io.StringIO(newline="\n")
    doc.write(text)
    path.write_bytes(text.getvalue().encode(doc.output_encoding))


def rectangle(x0: float, y0: float, x1: float, y1: float) -> list[Pair]:
    """Return the ring of an upright rectangle, counter-clockwise."""
    return [(x0, y0), (x1, y0), (x1, y1), (x0, y1)]


def offset(ring: Sequence[Pair], thickness: float) -> list[Pair]:
    """Return the outer face of a wall around a counter-clockwise ring with straight sides."""
    corners = [Vec2(vertex) for vertex in ring]
    outside = []
    for before, here, after in zip(corners[-1:] + corners, corners, corners[1:] + corners[:1], strict=False):
        incoming, outgoing = (here - before).normalize(), (after - here).normalize()
        turn = 1 + incoming.dot(outgoing)
        point = here - (incoming.orthogonal() + outgoing.orthogonal()) * (thickness / turn)
        outside.append((point.x, point.y))
    return outside


class Pen:
    """Draws into one layout or block.

    Parameters
    ----------
    layout
        Where it draws.
    text_height
        Height of room tags and dimension figures, in drawing units.
    """

    def __init__(self, layout: BaseLayout, text_height: float) -> None:
        self.layout = layout
        self.text_height = text_height

    def walls(self, faces: Iterable[Ring], openings: Sequence[Door | Window] = ()) -> None:
        """Draw every face as single lines and arcs, broken where there are doors, and fill in the openings."""
        gaps = [opening for opening in openings if isinstance(opening, Door)]
        for face in faces:
            for vertex, following in zip(face, [*face[1:], face[0]], strict=True):
                if len(vertex) == 3 and vertex[2]:
                    self.curve(vertex, following)
                else:
                    self._straight(Vec2(vertex[:2]), Vec2(following[:2]), gaps)
        for opening in openings:
            self._jambs(opening)
            if isinstance(opening, Door):
                self._leaves(opening)
            else:
                self._glass(opening)

    def curve(self, vertex: Vertex, following: Vertex, layer: str = "A-WALL") -> None:
        """Draw one curved piece of a wall's face."""
        points = [(vertex[0], vertex[1], vertex[2]), (following[0], following[1], 0)]
        self.layout.add_lwpolyline(points, format="xyb", dxfattribs={"layer": layer})

    def closed(self, layer: str, ring: Ring) -> None:
        """Draw a closed outline, with its bulges."""
        points = [(vertex[0], vertex[1], vertex[2] if len(vertex) == 3 else 0) for vertex in ring]
        self.layout.add_lwpolyline(points, format="xyb", close=True, dxfattribs={"layer": layer})

    def old_polyline(self, layer: str, ring: Ring) -> None:
        """Draw a closed outline as old programs do: a POLYLINE that repeats its first vertex, without the flag."""
        self.layout.add_polyline2d([vertex[:2] for vertex in [*ring, ring[0]]], dxfattribs={"layer": layer})

    def line(self, layer: str, start: Vertex, end: Vertex) -> None:
        """Draw one line."""
        self.layout.add_line(start, end, dxfattribs={"layer": layer})

    def circle(self, layer: str, centre: Pair, radius: float) -> None:
        """Draw one circle."""
        self.layout.add_circle(centre, radius, dxfattribs={"layer": layer})

    def tag(self, name: str, at: Pair, layer: str = "A-AREA-IDEN") -> None:
        """Write a room's name as TEXT about its middle."""
        text = self.layout.add_text(name, height=self.text_height, dxfattribs={"layer": layer})
        text.set_placement(at, align=TextEntityAlignment.MIDDLE_CENTER)

    def rich_tag(self, name: str, at: Pair) -> None:
        """Write a room's name as MTEXT about its middle, with formatting codes as programs write them."""
        attributes = {"layer": "A-AREA-IDEN", "char_height": self.text_height, "attachment_point": 5}
        self.layout.add_mtext(f"{{\\W0.9;{name}}}", dxfattribs={**attributes, "insert": at})

    def note(self, text: str, at: Pair) -> None:
        """Write a remark beside the plan."""
        attributes = {"layer": "A-ANNO-NOTE", "insert": at}
        self.layout.add_text(text, height=self.text_height, dxfattribs=attributes)

    def shelf(self, x0: float, y0: float, x1: float, y1: float) -> None:
        """Draw a shelf or rack: a rectangle with a diagonal."""
        self.closed("I-FURN", rectangle(x0, y0, x1, y1))
        self.line("I-FURN", (x0, y0), (x1, y1))

    def table(self, centre: Pair, length: float, width: float, seats: int = 0) -> None:
        """Draw a table with seats along both long sides."""
        x, y = centre
        self.closed("I-FURN", rectangle(x - length / 2, y - width / 2, x + length / 2, y + width / 2))
        for seat in range(seats):
            along = x - length / 2 + length * (seat + 0.5) / seats
            for side in (-1, 1):
                self.circle("I-FURN", (along, y + side * width * 0.8), width * 0.2)

    def dimension(self, start: Pair, end: Pair, distance: float, text: str = "<>") -> None:
        """Draw a dimension to the right of the way from ``start`` to ``end``, which is upright or level."""
        way = Vec2(end) - Vec2(start)
        base = Vec2(start) - way.orthogonal().normalize(distance)
        size = self.text_height
        style = {
            "dimtxt": size, "dimtsz": size / 2, "dimexo": size / 2, "dimexe": size / 2, "dimgap": size / 2,
            "dimtad": 1, "dimdec": 2, "dimdsep": ord("."), "dimlfac": 1.0, "dimtix": 1, "dimtmove": 0,
        }  # fmt: skip
        angle = 90 if abs(way.y) > abs(way.x) else 0
        dimension = self.layout.add_linear_dim(
            base, start, end, angle=angle, text=text, override=style, dxfattribs={"layer": "A-ANNO-DIMS"}
        )
        dimension.render()

    def _straight(self, start: Vec2, end: Vec2, gaps: Sequence[Door]) -> None:
        """Draw the pieces of one side of a face that doors leave standing."""
        length = (end - start).magnitude
        way = (end - start).normalize()
        stands = 0.0
        for near, far in sorted(_breaks(start, way, length, gaps)):
            self.line("A-WALL", start + way * stands, start + way * near)
            stands = far
        self.line("A-WALL", start + way * stands, end)

    def _jambs(self, opening: Door | Window) -> None:
        for jamb in (Vec2(opening.start), Vec2(opening.end)):
            self.line("A-WALL", jamb, jamb + Vec2(opening.through))

    def _glass(self, window: Window) -> None:
        for depth in (0.4, 0.6):
            shift = Vec2(window.through) * depth
            self.line("A-GLAZ", Vec2(window.start) + shift, Vec2(window.end) + shift)

    def _leaves(self, door: Door) -> None:
        shift = Vec2(door.through) if door.away else Vec2()
        start, end = Vec2(door.start) + shift, Vec2(door.end) + shift
        out = Vec2(door.through) if door.away else -Vec2(door.through)
        width = (end - start).magnitude / door.leaves
        for hinge, other in [(start, end), (end, start)][: door.leaves]:
            self._leaf(hinge, out.normalize(width), (other - hinge).normalize(width))

    def _leaf(self, hinge: Vec2, opened: Vec2, shut: Vec2) -> None:
        """Draw a leaf standing open, and the arc that it swings through."""
        self.line("A-DOOR", hinge, hinge + opened)
        first, last = (opened, shut) if opened.det(shut) > 0 else (shut, opened)
        attributes = {"layer": "A-DOOR"}
        self.layout.add_arc(hinge, opened.magnitude, first.angle_deg, last.angle_deg, dxfattribs=attributes)


def _breaks(start: Vec2, way: Vec2, length: float, gaps: Sequence[Door]) -> list[Pair]:
    """Return where, along one side of a face, doors break it."""
    found = []
    for door in gaps:
        for shift in (Vec2(), Vec2(door.through)):
            jambs = [Vec2(point) + shift - start for point in (door.start, door.end)]
            if all(abs(way.det(jamb)) < 1e-6 * length for jamb in jambs):
                near, far = sorted(way.dot(jamb) for jamb in jambs)
                if near >= 0 and far <= length:
                    found.append((near, far))
    return found
