"""The sample drawings with straight walls: a function each, rooms outlined along the inner faces of their walls."""

from drafting import (
    CENTIMETRE,
    INCH,
    METRE,
    MILLIMETRE,
    Door,
    Pair,
    Pen,
    Window,
    new_drawing,
    offset,
    rectangle,
)
from ezdxf.document import Drawing
from ezdxf.enums import TextEntityAlignment
from ezdxf.layouts.base import BaseLayout
from ezdxf.math import Vec3

__all__ = ["annex", "mezzanine", "small_features", "studios", "workshop"]


def workshop() -> Drawing:
    """Millimetres: an L, a T, a niche, a column, a pilaster, plain rooms, and old outlines on a layer switched off."""
    doc = new_drawing(MILLIMETRE)
    pen = Pen(doc.modelspace(), text_height=250)
    rooms: dict[str, list[Pair]] = {
        "Reading room": [(300, 300), (8300, 300), (8300, 5300), (3300, 5300), (3300, 12300), (300, 12300)],
        "Workshop": [
            (8500, 300), (18300, 300), (18300, 5300), (15300, 5300),
            (15300, 8300), (11500, 8300), (11500, 5300), (8500, 5300),
        ],
        "Entrance hall": [
            (3500, 5500), (11300, 5500), (11300, 8300), (5900, 8300), (5900, 12300), (3500, 12300),
        ],
        "Office": [
            (6100, 8500), (11300, 8500), (11300, 12300), (9200, 12300),
            (9200, 12450), (8000, 12450), (8000, 12300), (6100, 12300),
        ],
        "Materials store": rectangle(11500, 8500, 15300, 12300),
        "Plant room": rectangle(15500, 5500, 18300, 8300),
        "Tool store": [
            (15500, 8500), (18300, 8500), (18300, 10200), (18150, 10200),
            (18150, 10600), (18300, 10600), (18300, 12300), (15500, 12300),
        ],
    }  # fmt: skip
    tags = {
        "Reading room": (3000, 2800), "Workshop": (13400, 3400), "Entrance hall": (5800, 6900),
        "Office": (8700, 10000), "Materials store": (13400, 11300), "Plant room": (16950, 7120),
        "Tool store": (16800, 9200),
    }  # fmt: skip
    for name, outline in rooms.items():
        pen.closed("A-AREA", outline)
        pen.tag(name, tags[name])
    pen.walls([*rooms.values(), rectangle(0, 0, 18600, 12600)], _workshop_openings())
    pen.closed("A-COLS", rectangle(13200, 9800, 13600, 10200))
    _furnish_workshop(pen)
    pen.dimension((0, 0), (18600, 0), 900)
    pen.dimension((0, 12600), (0, 0), 900)
    pen.dimension((300, 300), (8300, 300), -4300)
    pen.note("WORKSHOP AND READING ROOM, GROUND FLOOR, DIMENSIONS IN MILLIMETRES", (0, -1900))
    doc.layers.add("A-AREA-PREV", color=8).off()
    pen.closed("A-AREA-PREV", rectangle(3500, 8500, 11300, 12300))
    return doc


def _workshop_openings() -> list[Door | Window]:
    inner, outer = 200, 300
    doors = [
        Door((3300, 10900), (3300, 10000), (inner, 0)),
        Door((4000, 12300), (5600, 12300), (0, outer), leaves=2),
        Door((11300, 6400), (11300, 7300), (inner, 0)),
        Door((10900, 8300), (10000, 8300), (0, inner), away=True),
        Door((12000, 8300), (13200, 8300), (0, inner), away=True),
        Door((15300, 6000), (15300, 6900), (inner, 0), away=True),
        Door((15300, 11800), (15300, 10900), (inner, 0), away=True),
        Door((10800, 300), (8900, 300), (0, -outer), leaves=2),
    ]
    windows = [
        Window((1000, 300), (3400, 300), (0, -outer)),
        Window((4400, 300), (6800, 300), (0, -outer)),
        Window((300, 2000), (300, 4400), (-outer, 0)),
        Window((300, 6800), (300, 9200), (-outer, 0)),
        Window((12600, 300), (15000, 300), (0, -outer)),
        Window((18300, 1600), (18300, 4000), (outer, 0)),
        Window((9600, 12300), (10900, 12300), (0, outer)),
    ]
    return [*doors, *windows]


def _furnish_workshop(pen: Pen) -> None:
    for centre in ((2200, 1500), (5800, 1500), (5800, 4000)):
        pen.table(centre, 2000, 900, seats=3)
    for level in (6000, 7600):
        pen.shelf(320, level, 670, level + 1400)
    for centre in ((10600, 2800), (16600, 2800), (13400, 7000)):
        pen.table(centre, 1800, 800)
    pen.table((7200, 11200), 1600, 800, seats=1)
    pen.shelf(11550, 8900, 12000, 12200)
    pen.shelf(15550, 11850, 18250, 12250)
    pen.closed("I-FURN", rectangle(16900, 7400, 18100, 8200))


def annex() -> Drawing:
    """Inches, written as feet and inches: an L and a T with rooms in the corners that they leave."""
    doc = new_drawing(INCH, metric=False)
    pen = Pen(doc.modelspace(), text_height=9)
    rooms: dict[str, list[Pair]] = {
        "Wood shop": [(8, 8), (296, 8), (296, 152), (152, 152), (152, 328), (8, 328)],
        "Finishing room": [
            (301, 104), (385, 104), (385, 8), (472, 8), (472, 328), (385, 328), (385, 232), (301, 232),
        ],
        "Glue-up room": rectangle(157, 157, 296, 328),
        "Tool crib": rectangle(301, 8, 380, 99),
        "Timber rack": rectangle(301, 237, 380, 328),
    }  # fmt: skip
    tags = {
        "Wood shop": (90, 100), "Finishing room": (410, 170), "Glue-up room": (226, 270),
        "Tool crib": (340, 60), "Timber rack": (340, 280),
    }  # fmt: skip
    for name, outline in rooms.items():
        pen.closed("A-AREA", outline)
        pen.tag(name, tags[name])
    doors = [
        Door((200, 8), (272, 8), (0, -8), leaves=2),
        Door((152, 236), (152, 200), (5, 0)),
        Door((296, 144), (296, 108), (5, 0)),
        Door((380, 30), (380, 66), (5, 0), away=True),
        Door((380, 296), (380, 260), (5, 0), away=True),
    ]
    windows = [
        Window((40, 8), (136, 8), (0, -8)),
        Window((8, 60), (8, 156), (-8, 0)),
        Window((190, 328), (262, 328), (0, 8)),
        Window((472, 120), (472, 216), (8, 0)),
    ]
    pen.walls([*rooms.values(), rectangle(0, 0, 480, 336)], [*doors, *windows])
    for centre in ((80, 60), (230, 110), (80, 260)):
        pen.table(centre, 72, 30)
    pen.shelf(303, 10, 321, 97)
    pen.shelf(303, 308, 378, 326)
    pen.table((226, 220), 96, 40)
    pen.dimension((0, 0), (480, 0), 36, "40'-0\"")
    pen.dimension((0, 336), (0, 0), 36, "28'-0\"")
    pen.dimension((8, 8), (296, 8), -22, "24'-0\"")
    pen.note("WOOD SHOP ANNEX, DIMENSIONS IN FEET AND INCHES", (0, -72))
    return doc


def studios() -> Drawing:
    """Centimetres: one studio as a block with blocks inside, plain, mirrored, rotated, and two inside another block."""
    doc = new_drawing(CENTIMETRE)
    _desk_block(doc)
    _studio_block(doc)
    pair = doc.blocks.new("STUDIO-PAIR")
    for name, mirror, at in (("Studio 5", 1, (0, 0)), ("Studio 6", -1, (-20, 0))):
        _place_studio(pair, name, at, mirror=mirror)
    space = doc.modelspace()
    _place_studio(space, "Studio 1", (0, 0))
    _place_studio(space, "Studio 2", (-20, 0), mirror=-1)
    _place_studio(space, "Studio 3", (-20, -20), rotation=180)
    _place_studio(space, "Studio 4", (0, -20), mirror=-1, rotation=180)
    attributes = {"layer": "A-WALL", "rotation": 30}
    space.add_blockref("STUDIO-PAIR", (1350, -400), dxfattribs=attributes)
    pen = Pen(space, text_height=25)
    pen.dimension((-520, -640), (500, -640), 110)
    pen.note("STUDIOS, DIMENSIONS IN CENTIMETRES", (-520, -870))
    return doc


def _desk_block(doc: Drawing) -> None:
    pen = Pen(doc.blocks.new("DESK"), text_height=20)
    pen.closed("I-FURN", rectangle(0, 0, 160, 80))
    pen.circle("I-FURN", (80, 110), 22)


def _studio_block(doc: Drawing) -> None:
    """Draw one studio: an L, its porch in the corner that the L leaves."""
    block = doc.blocks.new("STUDIO")
    pen = Pen(block, text_height=25)
    outline = [(0.0, 0.0), (480.0, 0.0), (480.0, 420.0), (360.0, 420.0), (360.0, 600.0), (0.0, 600.0)]
    openings: list[Door | Window] = [
        Door((470, 420), (385, 420), (0, 20)),
        Window((120, 600), (300, 600), (0, 20)),
        Window((480, 120), (480, 320), (20, 0)),
    ]
    pen.walls([outline, offset(outline, 20)], openings)
    pen.closed("A-AREA", outline)
    attributes = {"layer": "A-AREA-IDEN"}
    definition = block.add_attdef("NAME", text="Studio", height=25, dxfattribs=attributes)
    definition.set_placement((200, 260), align=TextEntityAlignment.MIDDLE_CENTER)
    block.add_blockref("DESK", (10, 560), dxfattribs={"layer": "I-FURN", "rotation": -90})
    block.add_blockref("DESK", (380, 10), dxfattribs={"layer": "I-FURN", "xscale": -1})


def _place_studio(
    layout: BaseLayout, name: str, at: tuple[float, float], mirror: int = 1, rotation: float = 0
) -> None:
    attributes = {"layer": "A-WALL", "xscale": mirror, "rotation": rotation}
    insert = layout.add_blockref("STUDIO", at, dxfattribs=attributes)
    middle = insert.matrix44().transform(Vec3(200, 260))  # the text itself is never mirrored
    label = insert.add_attrib("NAME", name, dxfattribs={"layer": "A-AREA-IDEN", "height": 25})
    label.set_placement(middle, align=TextEntityAlignment.MIDDLE_CENTER)


def mezzanine() -> Drawing:
    """Metres, walls alone and no outlines: a line, a point, and a plain room that nobody named."""
    doc = new_drawing(METRE)
    pen = Pen(doc.modelspace(), text_height=0.25)
    crossing = [
        (4, 0), (6, 0), (6, 4), (8, 4), (8, 6), (4, 6), (4, 8), (2, 8), (2, 4), (0, 4), (0, 2), (4, 2),
    ]  # fmt: skip
    landing = [
        (8.25, 2), (12.25, 2), (12.25, 4), (16.25, 4), (16.25, 8), (12.25, 8), (12.25, 6), (8.25, 6),
    ]  # fmt: skip
    store = rectangle(12.5, 0, 16.25, 3.75)
    around = [
        (4, 0), (6, 0), (6, 4), (8.25, 4), (8.25, 2), (12.5, 2), (12.5, 0), (16.25, 0), (16.25, 8), (12.25, 8),
        (12.25, 6), (4, 6), (4, 8), (2, 8), (2, 4), (0, 4), (0, 2), (4, 2),
    ]  # fmt: skip
    pen.tag("Crossing", (4, 4.5))
    pen.tag("Landing", (10.2, 3.0))
    doors = [
        Door((8, 4.4), (8, 5.3), (0.25, 0)),
        Door((14.3, 4), (13.4, 4), (0, -0.25), away=True),
        Door((4.5, 0), (5.5, 0), (0, -0.25)),
    ]
    windows = [
        Window((2.4, 8), (3.6, 8), (0, 0.25)),
        Window((0, 3.6), (0, 2.4), (-0.25, 0)),
        Window((16.25, 5), (16.25, 7), (0.25, 0)),
        Window((9.2, 2), (11.2, 2), (0, -0.25)),
    ]
    pen.walls([crossing, landing, store, offset(around, 0.25)], [*doors, *windows])
    pen.table((15.0, 7.3), 1.4, 0.7, seats=2)
    pen.shelf(12.55, 0.05, 16.2, 0.4)
    pen.dimension((0, 0), (16.25, 0), 0.9)
    pen.note("MEZZANINE, DIMENSIONS IN METRES", (0, -1.9))
    return doc


def small_features() -> Drawing:
    """Millimetres: five store rooms of 6 x 4 m, each with one small thing that upsets an exact answer, or seems to."""
    doc = new_drawing(MILLIMETRE)
    pen = Pen(doc.modelspace(), text_height=250)
    rooms: dict[str, list[Pair]] = {
        "Pilaster": [
            (0, 0), (2800, 0), (2800, 200), (3200, 200), (3200, 0), (6000, 0), (6000, 4000), (0, 4000),
        ],
        "Window reveal": [
            (0, 0), (6000, 0), (6000, 4000), (3800, 4000), (3800, 4150), (2000, 4150), (2000, 4000), (0, 4000),
        ],
        "Skirting jog": [(0, 0), (3000, 0), (3000, 20), (6000, 20), (6000, 4000), (0, 4000)],
        "Chamfer": [(0, 0), (5700, 0), (6000, 300), (6000, 4000), (0, 4000)],
        "Column": rectangle(0, 0, 6000, 4000),
    }  # fmt: skip
    placed, doors = [], []
    for number, (name, outline) in enumerate(rooms.items()):
        x0 = 200 + 6200 * number
        placed.append([(x0 + x, 200 + y) for x, y in outline])
        pen.closed("A-AREA", placed[-1])
        pen.tag(name, (x0 + 4300, 1500))
        doors.append(Door((x0 + 5400, 4200), (x0 + 4500, 4200), (0, 200)))
    pen.walls([*placed, rectangle(0, 0, 31200, 4400)], [*doors, Window((8400, 4350), (10200, 4350), (0, 50))])
    pen.closed("A-COLS", rectangle(27200, 1850, 27500, 2150))
    pen.dimension((0, 0), (31200, 0), 900)
    pen.note("STORE ROOMS, DIMENSIONS IN MILLIMETRES", (0, -1900))
    return doc
