"""Invented plans whose rooms are known: drawn in as many ways as people draw, for trying the reading on.

A building is a rectangle, divided again and again by walls. Its rooms are the cells, less the thickness of the walls
where these are drawn double. Each choice (single or double walls, how doors and windows are drawn, layers named or
not, unit, rotation, untidiness) comes from one seed, so that a plan can be made again.
"""

from dataclasses import dataclass, field
from itertools import pairwise
from math import atan2, cos, degrees, hypot, radians, sin
from pathlib import Path
from random import Random

import ezdxf
from ezdxf.layouts import Modelspace

UNITS = {"mm": (4, 1000.0), "cm": (5, 100.0), "m": (6, 1.0), "in": (1, 1 / 0.0254), "ft": (2, 1 / 0.3048)}
DOORS = ("gap", "line", "rectangle", "arc", "block", "double")
WINDOWS = ("line", "rectangle", "overlay", "none")
NAMES = (
    "Foundry",
    "Studio",
    "Bindery",
    "Pantry",
    "Library",
    "Kiln room",
    "Loom room",
    "Office",
    "Archive",
    "Hall",
)
LAYERS = (
    {"wall": "A-WALL", "door": "A-DOOR", "window": "A-GLAZ", "text": "A-ANNO-TEXT", "furniture": "A-FURN"},
    {"wall": "Wände", "door": "Türen", "window": "Fenster", "text": "Text", "furniture": "Möbel"},
    {
        "wall": "x$0$muri",
        "door": "x$0$porte",
        "window": "x$0$finestre",
        "text": "quote",
        "furniture": "arredi",
    },
    {"wall": "0", "door": "0", "window": "0", "text": "0", "furniture": "FURNITURE"},
    {"wall": "plan", "door": "plan", "window": "A-GLAZ", "text": "plan", "furniture": "FURN"},
)

Point = tuple[float, float]
Box = tuple[float, float, float, float]
"""Low x, low y, high x, high y."""


@dataclass
class TrueRoom:
    """A room as it was meant: its corners in metres, and its name if a label says it."""

    corners: list[Point]
    name: str = ""

    @property
    def area(self) -> float:
        pairs = zip(self.corners, [*self.corners[1:], self.corners[0]], strict=True)
        return abs(sum(a[0] * b[1] - b[0] * a[1] for a, b in pairs)) / 2

    @property
    def middle(self) -> Point:
        n = len(self.corners)
        return sum(p[0] for p in self.corners) / n, sum(p[1] for p in self.corners) / n


@dataclass
class Manner:
    """How one plan is drawn."""

    double: bool
    thickness: float
    layers: dict[str, str]
    door: str
    window: str
    caps: bool
    untidy: float
    split: bool
    repeat: bool
    labels: bool
    furniture: bool
    noise: bool
    unit: str
    turn: float
    origin: Point
    floors: int

    @classmethod
    def drawn_from(cls, dice: Random) -> "Manner":
        double = dice.random() < 0.7
        return cls(
            double=double,
            thickness=dice.choice([0.1, 0.115, 0.15, 0.24, 0.3]) if double else 0.0,
            layers=dice.choice(LAYERS),
            door=dice.choice(DOORS),
            window=dice.choice(WINDOWS),
            caps=dice.random() < 0.8,
            untidy=dice.choice([0.0, 0.0, 0.001, 0.003]),
            split=dice.random() < 0.3,
            repeat=dice.random() < 0.2,
            labels=dice.random() < 0.6,
            furniture=dice.random() < 0.5,
            noise=dice.random() < 0.5,
            unit=dice.choice(list(UNITS)),
            turn=dice.choice([0.0, 0.0, 0.0, 90.0, 17.3, 45.0, 201.7]),
            origin=dice.choice([(0.0, 0.0), (0.0, 0.0), (1234.5, -77.25), (512000.0, 5403000.0)]),
            floors=dice.choice([1, 1, 1, 2]),
        )


@dataclass
class TruePlan:
    """A drawn plan and what is in it."""

    manner: Manner
    rooms: list[TrueRoom] = field(default_factory=list)


def write_plan(path: Path, seed: int) -> TruePlan:
    """Draw the plan of a seed into a file and return what it shows."""
    dice = Random(seed)
    manner = Manner.drawn_from(dice)
    code, scale = UNITS[manner.unit]
    drawing = ezdxf.new("R2010")
    drawing.header["$INSUNITS"] = code
    pen = _Pen(drawing.modelspace(), manner, scale, dice)
    plan = TruePlan(manner)
    for floor in range(manner.floors):
        _draw_floor(pen, plan, (floor * 40.0, 0.0))
    drawing.saveas(path)
    return plan


class _Pen:
    """Draws in metres, unturned; the drawing gets its unit, turn and origin here."""

    def __init__(self, space: Modelspace, manner: Manner, scale: float, dice: Random) -> None:
        self.space, self.manner, self.scale, self.dice = space, manner, scale, dice
        self.offset = (0.0, 0.0)

    def place(self, point: Point) -> Point:
        x, y = point[0] + self.offset[0], point[1] + self.offset[1]
        c, s = cos(radians(self.manner.turn)), sin(radians(self.manner.turn))
        return self.manner.origin[0] + c * x - s * y, self.manner.origin[1] + s * x + c * y

    def at(self, point: Point) -> Point:
        x, y = self.place(point)
        return x * self.scale, y * self.scale

    def line(self, a: Point, b: Point, role: str, tidy: bool = False) -> None:
        long = hypot(b[0] - a[0], b[1] - a[1])
        if long < 1e-6:
            return
        ends = [0.0, 1.0]
        if self.manner.untidy and not tidy:
            ends = [e + self.dice.uniform(-1, 1) * self.manner.untidy / long for e in ends]
        if self.manner.split and long > 1 and not tidy:
            ends.insert(1, self.dice.uniform(0.3, 0.7))
        for low, high in pairwise(ends):
            self._piece(a, b, low, high, role)
        if self.manner.repeat and long > 1 and self.dice.random() < 0.3:
            self._piece(a, b, 0.2, 0.8, role)

    def _piece(self, a: Point, b: Point, low: float, high: float, role: str) -> None:
        start, end = ((a[0] + (b[0] - a[0]) * t, a[1] + (b[1] - a[1]) * t) for t in (low, high))
        self.space.add_line(self.at(start), self.at(end), dxfattribs={"layer": self.manner.layers[role]})

    def outline(self, corners: list[Point], role: str) -> None:
        self.space.add_lwpolyline(
            [self.at(p) for p in corners], close=True, dxfattribs={"layer": self.manner.layers[role]}
        )

    def text(self, words: str, point: Point, height: float = 0.2) -> None:
        x, y = self.at(point)
        entity = self.space.add_text(
            words,
            height=height * self.scale,
            dxfattribs={"layer": self.manner.layers["text"], "insert": (x, y)},
        )
        entity.dxf.rotation = self.manner.turn


def _draw_floor(pen: _Pen, plan: TruePlan, offset: Point) -> None:
    dice, manner = pen.dice, pen.manner
    pen.offset = offset
    wide, deep = dice.uniform(8, 26), dice.uniform(6, 18)
    cells = _cells((0.0, 0.0, wide, deep), dice)
    half = manner.thickness / 2
    openings = _openings(cells, (0.0, 0.0, wide, deep), manner, dice)
    if manner.double:
        for box in cells:
            _draw_faces(pen, _grown(box, -half), openings, half)
        _draw_faces(pen, (-half, -half, wide + half, deep + half), openings, half)
    else:
        _draw_single(pen, cells, openings)
    for opening in openings:
        _draw_opening(pen, opening, half)
    for box in cells:
        low_x, low_y, high_x, high_y = _grown(box, -half)
        corners = [(low_x, low_y), (high_x, low_y), (high_x, high_y), (low_x, high_y)]
        room = TrueRoom([pen.place(corner) for corner in corners])
        if manner.labels:
            room.name = dice.choice(NAMES)
            pen.text(room.name, ((low_x + high_x) / 2 - 0.5, (low_y + high_y) / 2))
            if dice.random() < 0.5:
                pen.text(
                    f"{room.area:.1f} m2", ((low_x + high_x) / 2 - 0.5, (low_y + high_y) / 2 - 0.35), 0.15
                )
        if manner.furniture:
            _draw_furniture(pen, (low_x, low_y, high_x, high_y))
        plan.rooms.append(room)
    if manner.noise:
        _draw_noise(pen, wide, deep)


def _cells(box: Box, dice: Random) -> list[Box]:
    """Divide a box by walls until its cells are of a room's size."""
    low_x, low_y, high_x, high_y = box
    wide, deep = high_x - low_x, high_y - low_y
    most = dice.uniform(3.0, 8.0)
    if max(wide, deep) < max(most, 5.2):
        return [box]
    share = dice.uniform(0.38, 0.62)
    if wide >= deep:
        cut = low_x + share * wide
        return _cells((low_x, low_y, cut, high_y), dice) + _cells((cut, low_y, high_x, high_y), dice)
    cut = low_y + share * deep
    return _cells((low_x, low_y, high_x, cut), dice) + _cells((low_x, cut, high_x, high_y), dice)


@dataclass
class _Opening:
    """A hole in a wall: the wall's direction, its line, from where to where, and what stands in it."""

    upright: bool
    line: float
    low: float
    high: float
    style: str
    role: str

    def point(self, along: float, off: float) -> Point:
        return (self.line + off, along) if self.upright else (along, self.line + off)


def _openings(cells: list[Box], hull: Box, manner: Manner, dice: Random) -> list[_Opening]:
    found = []
    for k, a in enumerate(cells):
        for b in cells[k + 1 :]:
            for upright in (True, False):
                shared = _shared(a, b, upright)
                if shared and shared[2] - shared[1] > 1.8 and dice.random() < 0.6:
                    found.append(_door(upright, *shared, manner, dice))
        if manner.window != "none":
            found += [
                opening for side in range(4) if (opening := _window(a, hull, side, manner, dice)) is not None
            ]
    return found


def _shared(a: Box, b: Box, upright: bool) -> tuple[float, float, float] | None:
    """Return the line that two cells share and from where to where."""
    i, j = (0, 1) if upright else (1, 0)
    for left, right in ((a, b), (b, a)):
        if abs(left[i + 2] - right[i]) < 1e-9:
            low, high = max(left[j], right[j]), min(left[j + 2], right[j + 2])
            if high > low:
                return left[i + 2], low, high
    return None


def _door(upright: bool, line: float, low: float, high: float, manner: Manner, dice: Random) -> _Opening:
    wide = dice.uniform(1.4, 1.8) if manner.door == "double" else dice.uniform(0.7, 1.1)
    wide = min(wide, high - low - 0.7)
    start = dice.uniform(low + 0.35, high - wide - 0.35)
    return _Opening(upright, line, start, start + wide, manner.door, "door")


def _window(box: Box, hull: Box, side: int, manner: Manner, dice: Random) -> _Opening | None:
    upright = side % 2 == 0
    if abs(box[side] - hull[side]) > 1e-9 or dice.random() < 0.5:
        return None
    low, high = (box[1], box[3]) if upright else (box[0], box[2])
    wide = min(dice.uniform(0.6, 2.4), high - low - 0.9)
    if wide < 0.5:
        return None
    start = dice.uniform(low + 0.45, high - wide - 0.45)
    return _Opening(upright, box[side], start, start + wide, manner.window, "window")


def _grown(box: Box, by: float) -> Box:
    return box[0] - by, box[1] - by, box[2] + by, box[3] + by


def _draw_faces(pen: _Pen, box: Box, openings: list[_Opening], half: float) -> None:
    low_x, low_y, high_x, high_y = box
    for upright, line, low, high in (
        (False, low_y, low_x, high_x),
        (True, high_x, low_y, high_y),
        (False, high_y, low_x, high_x),
        (True, low_x, low_y, high_y),
    ):
        holes = [
            o
            for o in openings
            if o.upright == upright
            and abs(o.line - line) < half + 1e-9
            and low < o.low < high
            and o.style != "overlay"
        ]
        _draw_run(pen, upright, line, low, high, holes)


def _draw_single(pen: _Pen, cells: list[Box], openings: list[_Opening]) -> None:
    runs: dict[tuple[bool, float], list[tuple[float, float]]] = {}
    for low_x, low_y, high_x, high_y in cells:
        for upright, line, low, high in (
            (False, low_y, low_x, high_x),
            (True, high_x, low_y, high_y),
            (False, high_y, low_x, high_x),
            (True, low_x, low_y, high_y),
        ):
            runs.setdefault((upright, round(line, 9)), []).append((low, high))
    for (upright, line), spans in runs.items():
        for low, high in _merged(spans):
            holes = [
                o
                for o in openings
                if o.upright == upright
                and abs(o.line - line) < 1e-6
                and low < o.low < high
                and o.style != "overlay"
            ]
            _draw_run(pen, upright, line, low, high, holes)


def _merged(spans: list[tuple[float, float]]) -> list[tuple[float, float]]:
    out: list[tuple[float, float]] = []
    for low, high in sorted(spans):
        if out and low <= out[-1][1] + 1e-9:
            out[-1] = (out[-1][0], max(out[-1][1], high))
        else:
            out.append((low, high))
    return out


def _draw_run(pen: _Pen, upright: bool, line: float, low: float, high: float, holes: list[_Opening]) -> None:
    at = low
    for hole in sorted(holes, key=lambda hole: hole.low):
        _draw_piece(pen, upright, line, at, hole.low)
        at = hole.high
    _draw_piece(pen, upright, line, at, high)


def _draw_piece(pen: _Pen, upright: bool, line: float, low: float, high: float) -> None:
    ends = ((line, low), (line, high)) if upright else ((low, line), (high, line))
    pen.line(*ends, "wall")


def _draw_opening(pen: _Pen, opening: _Opening, half: float) -> None:
    style, role = opening.style, opening.role
    if half and style != "overlay" and pen.manner.caps:
        for along in (opening.low, opening.high):
            pen.line(opening.point(along, -half), opening.point(along, half), "wall", tidy=True)
    if style in {"line", "overlay"}:
        offsets = (-half, 0.0, half) if half else (0.0,)
        for off in offsets:
            pen.line(opening.point(opening.low, off), opening.point(opening.high, off), role, tidy=True)
    elif style == "rectangle":
        off = half or 0.03
        pen.outline(
            [
                opening.point(opening.low, -off),
                opening.point(opening.high, -off),
                opening.point(opening.high, off),
                opening.point(opening.low, off),
            ],
            role,
        )
    elif style == "arc":
        _draw_swing(pen, opening, opening.low, opening.high, half)
    elif style == "double":
        middle = (opening.low + opening.high) / 2
        _draw_swing(pen, opening, opening.low, middle, half)
        _draw_swing(pen, opening, opening.high, middle, half)
    elif style == "block":
        _insert_door(pen, opening, half)


def _draw_swing(pen: _Pen, opening: _Opening, hinge: float, strike: float, half: float) -> None:
    """Draw a leaf standing open at a right angle, and the arc of its tip."""
    leaf = strike - hinge
    tip = opening.point(hinge, half + abs(leaf))
    pen.line(opening.point(hinge, half), tip, "door", tidy=True)
    centre = opening.point(hinge, half)
    ends = [(p[0] - centre[0], p[1] - centre[1]) for p in (tip, opening.point(strike, half))]
    _arc(pen, centre, abs(leaf), ends[0], ends[1])


def _arc(pen: _Pen, centre: Point, radius: float, first: Point, second: Point) -> None:
    a, b = (degrees(atan2(p[1], p[0])) for p in (first, second))
    if (b - a) % 360 > 180:
        a, b = b, a
    pen.space.add_arc(
        pen.at(centre),
        radius * pen.scale,
        a + pen.manner.turn,
        b + pen.manner.turn,
        dxfattribs={"layer": pen.manner.layers["door"]},
    )


def _insert_door(pen: _Pen, opening: _Opening, half: float) -> None:
    """Insert a block one unit wide: leaf and arc, hinge at its base point, mirrored where need be."""
    drawing = pen.space.doc
    if "DOOR-LEAF" not in drawing.blocks:
        block = drawing.blocks.new("DOOR-LEAF")
        block.add_lwpolyline([(0, 0), (0, 1), (0.04, 1), (0.04, 0)], close=True)
        block.add_arc((0, 0), 1, 0, 90)
    wide = (opening.high - opening.low) * pen.scale
    hinge = opening.point(opening.low, half)
    turn, mirror = (90.0, -1.0) if opening.upright else (0.0, 1.0)
    pen.space.add_blockref(
        "DOOR-LEAF",
        pen.at(hinge),
        dxfattribs={
            "layer": pen.manner.layers["door"],
            "rotation": pen.manner.turn + turn,
            "xscale": wide,
            "yscale": wide * mirror,
        },
    )


def _draw_furniture(pen: _Pen, box: Box) -> None:
    low_x, low_y, high_x, high_y = box
    x, y = pen.dice.uniform(low_x + 0.1, high_x - 1.4), pen.dice.uniform(low_y + 0.1, high_y - 0.9)
    pen.outline([(x, y), (x + 1.2, y), (x + 1.2, y + 0.7), (x, y + 0.7)], "furniture")
    pen.space.add_circle(
        pen.at((low_x + 0.5, high_y - 0.5)),
        0.25 * pen.scale,
        dxfattribs={"layer": pen.manner.layers["furniture"]},
    )


def _draw_noise(pen: _Pen, wide: float, deep: float) -> None:
    """A sheet's frame, a title block, a note, a dimension and a north arrow, all outside the building."""
    layer = {"layer": "A-ANNO-TTLB"}
    for low, high in (((-4, -6), (wide + 6, deep + 4)), ((wide - 2, -6), (wide + 6, -4))):
        corners = [low, (high[0], low[1]), high, (low[0], high[1])]
        pen.space.add_lwpolyline([pen.at(p) for p in corners], close=True, dxfattribs=layer)
    pen.text("All dimensions to be checked on site", (0, -3), 0.25)
    pen.space.add_circle(pen.at((wide + 3, deep + 2)), 0.8 * pen.scale, dxfattribs={"layer": "north"})
    pen.space.add_aligned_dim(
        p1=pen.at((0, -1)),
        p2=pen.at((wide, -1)),
        distance=-0.5 * pen.scale,
        dxfattribs={"layer": "A-ANNO-DIMS"},
    ).render()
