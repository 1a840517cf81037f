"""The sample drawings with curved walls: a function each, rooms outlined along the inner faces of their walls."""

from math import pi, radians, sqrt

from drafting import METRE, Door, Pair, Pen, Window, new_drawing, offset, rectangle
from ezdxf import transform
from ezdxf.document import Drawing
from ezdxf.math import Matrix44

__all__ = ["library", "pavilion"]


def library() -> Drawing:
    """Metres: a U, walls curved outward and inward, a corner column, a splayed niche, a round column."""
    doc = new_drawing(METRE)
    pen = Pen(doc.modelspace(), text_height=0.25)
    reading_bay = [(12.5, 4.5), (18.3, 4.5), (18.3, 5.5, 0.5), (18.3, 8.5), (18.3, 9.5), (12.5, 9.5)]
    quiet_room = [(12.5, 9.7), (18.3, 9.7), (18.3, 12.5), (17.4, 12.5, -0.25), (13.4, 12.5), (12.5, 12.5)]
    straight: dict[str, list[Pair]] = {
        "Gallery": [
            (0.3, 4.5), (12.3, 4.5), (12.3, 12.5), (8.6, 12.5), (8.6, 7.7), (4.0, 7.7), (4.0, 12.5), (0.3, 12.5),
        ],
        "Archive": [(0.3, 0.3), (6.3, 0.3), (6.3, 4.3), (0.7, 4.3), (0.7, 3.9), (0.3, 3.9)],
        "Study": [
            (6.5, 0.3), (8.5, 0.3), (8.65, 0.15), (10.15, 0.15), (10.3, 0.3), (12.3, 0.3), (12.3, 4.3), (6.5, 4.3),
        ],
        "Map room": rectangle(12.5, 0.3, 18.3, 4.3),
    }  # fmt: skip
    tags = {"Archive": (3.3, 2.6), "Study": (9.4, 2.6), "Map room": (14.0, 2.6), "Gallery": (6.3, 6.0)}
    for name, outline in straight.items():
        draw = pen.old_polyline if name in {"Gallery", "Study"} else pen.closed
        draw("A-AREA", outline)
        pen.rich_tag(name, tags[name])
    pen.closed("A-AREA", reading_bay)
    pen.rich_tag("Reading bay", (15.0, 8.0))
    pen.closed("A-AREA", quiet_room)
    pen.rich_tag("Quiet room", (15.4, 10.3))
    pen.walls([*straight.values(), reading_bay, quiet_room, _library_outer_face()], _library_openings())
    pen.closed("A-COLS", rectangle(0.3, 3.9, 0.7, 4.3))
    pen.circle("A-COLS", (15.4, 2.3), 0.25)
    _furnish_library(pen)
    pen.dimension((0, 0), (18.6, 0), 0.9)
    pen.dimension((0, 12.8), (0, 0), 0.9)
    pen.note("LIBRARY WING, DIMENSIONS IN METRES", (0, -1.9))
    return doc


def _library_outer_face() -> list[tuple[float, ...]]:
    """Return the outer face: 0.3 m around the rooms, so that its arcs have the rooms' centres, 0.3 m more or less."""
    bay_half = sqrt(2.175**2 - 1.425**2)
    dip_half = sqrt(3.95**2 - 3.45**2)
    return [
        (0, 0), (18.6, 0), (18.6, 7.0 - bay_half, 0.75 / bay_half), (18.6, 7.0 + bay_half), (18.6, 12.8),
        (15.4 + dip_half, 12.8, -0.5 / dip_half), (15.4 - dip_half, 12.8),
        (8.3, 12.8), (8.3, 8.0), (4.3, 8.0), (4.3, 12.8), (0, 12.8),
    ]  # fmt: skip


def _library_openings() -> list[Door | Window]:
    inner, outer = 0.2, 0.3
    doors = [
        Door((2.0, 4.5), (2.9, 4.5), (0, -inner), away=True),
        Door((10.4, 4.5), (9.5, 4.5), (0, -inner), away=True),
        Door((12.3, 6.0), (12.3, 5.1), (inner, 0)),
        Door((12.3, 11.9), (12.3, 11.0), (inner, 0)),
        Door((13.2, 4.5), (14.1, 4.5), (0, -inner), away=True),
        Door((5.4, 7.7), (7.2, 7.7), (0, outer), away=True, leaves=2),
    ]
    windows = [
        Window((1.5, 0.3), (4.5, 0.3), (0, -outer)),
        Window((13.5, 0.3), (17.0, 0.3), (0, -outer)),
        Window((0.3, 6.0), (0.3, 11.0), (-outer, 0)),
        Window((4.0, 8.6), (4.0, 11.6), (outer, 0)),
        Window((8.6, 8.6), (8.6, 11.6), (-outer, 0)),
    ]
    return [*doors, *windows]


def _furnish_library(pen: Pen) -> None:
    for level in (4.9, 9.6):
        pen.table((2.2, level + 1.2), 1.8, 0.9, seats=3)
    pen.shelf(11.85, 8.2, 12.25, 10.4)
    pen.shelf(1.5, 0.4, 5.8, 0.8)
    pen.shelf(5.9, 1.2, 6.25, 3.6)
    pen.table((9.4, 1.3), 1.6, 0.8, seats=1)
    pen.table((17.0, 7.0), 1.2, 1.2, seats=2)
    pen.table((17.0, 3.4), 1.6, 0.9)
    pen.circle("L-PLNT", (6.3, 10.4), 1.1)
    pen.circle("L-PLNT", (6.3, 10.4), 0.15)


def pavilion() -> Drawing:
    """Metres on a survey grid: a circle, an ellipse, a spline and a hatch for outlines, 5,400 km from the origin."""
    doc = new_drawing(METRE)
    for layer in ("SPACE", "Grotto Room"):
        doc.layers.add(layer, color=6)
    space = doc.modelspace()
    pen = Pen(space, text_height=0.25)
    _drum(pen)
    _oval(pen)
    garden_room = [(1.0, 5.0), (5.0, 6.0), (9.0, 5.0), (9.0, 11.0), (1.0, 11.0)]
    hatch = space.add_hatch(dxfattribs={"layer": "SPACE"})
    hatch.paths.add_polyline_path(garden_room, is_closed=True)
    hatch.set_pattern_fill("ANSI31", scale=0.15)
    pen.tag("Garden room", (5, 8.5), layer="SPACE")
    doors: list[Door | Window] = [Door((1, 9), (1, 8), (-0.3, 0)), Window((3, 11), (7, 11), (0, 0.3))]
    pen.walls([garden_room, offset(garden_room, 0.3)], doors)
    _grotto(pen)
    pen.note("PAVILION, SURVEY GRID, METRES", (-8, -4.6))
    grid = Matrix44.z_rotate(radians(17.5)) @ Matrix44.translate(512_300.0, 5_403_700.0, 0)
    transform.inplace(space, grid)
    return doc


def _drum(pen: Pen) -> None:
    """Draw a round room of 3 m radius, its door towards the east."""
    pen.circle("SPACE", (0, 0), 3)
    pen.tag("Drum", (0, 0), layer="SPACE")
    for radius in (3, 3.3):
        pen.layout.add_arc((0, 0), radius, 10, 350, dxfattribs={"layer": "A-WALL"})
    pen.line("A-DOOR", (2.98, -0.5), (2.98, 0.5))


def _oval(pen: Pen) -> None:
    """Draw an oval room of 4 m by 2.75 m half-axes, its door towards the drum."""
    pen.layout.add_ellipse((9.5, 0), (4, 0), 2.75 / 4, dxfattribs={"layer": "SPACE"})
    pen.tag("Oval", (9.5, 0), layer="SPACE")
    for extra in (0, 0.3):
        pen.layout.add_ellipse(
            (9.5, 0), (4 + extra, 0), (2.75 + extra) / (4 + extra), pi + 0.16, 3 * pi - 0.16,
            dxfattribs={"layer": "A-WALL"},
        )  # fmt: skip
    pen.line("A-DOOR", (5.53, -0.44), (5.53, 0.44))


def _grotto(pen: Pen) -> None:
    """Draw a bean-shaped room as a closed spline; no text in it, so that its layer names it."""
    bean = [
        (-4.5, 5.0), (-3.0, 5.0), (-0.8, 6.0), (-1.2, 10.0), (-3.8, 10.5), (-4.6, 8.6),
        (-6.2, 10.8), (-8.6, 9.0), (-8.0, 5.5), (-6.0, 5.0), (-4.5, 5.0),
    ]  # fmt: skip
    for layer, scale in (("Grotto Room", 1.0), ("A-WALL", 1.1)):
        points = [(-4.6 + (x + 4.6) * scale, 7.4 + (y - 7.4) * scale, 0.0) for x, y in bean]
        spline = pen.layout.add_spline(dxfattribs={"layer": layer})
        spline.set_open_uniform(points, degree=3)
        spline.closed = True
