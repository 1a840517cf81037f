"""The tags of the plan: letters at the points, at the walls in conflict and at small features, and one tag a room.

A room's tag says as much as its room holds: number, name, area and kernel; else without the area; else number and
name; else the number, and always that no point sees every wall or that no device covers the room where that is so.
Where not even that fits, the tag stands outside at the end of a leader line. What finds no place at all is returned by
name, so that the sheet can say so.
"""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from itertools import pairwise

import numpy as np

from kernelscan.coverage.wording import Custom, kernel_in_words
from kernelscan.markup.drawing import corner_rings, seeing_arrow
from kernelscan.markup.labels import Label, Line, boxes_around, dot, nearest_in
from kernelscan.markup.placing import Occupied, boxes_inside, inner_points
from kernelscan.markup.scene import Box, Item, Point, Stroke
from kernelscan.markup.shown import ShownRoom
from kernelscan.markup.style import (
    CONFLICT_LETTERS,
    HEADING,
    LEADER_PEN,
    SYMBOL_RADIUS,
    TRIED_LETTER,
    WALL_BAND,
)
from kernelscan.markup.symbols import aim_lines, box_around, spot_ring, tried_ring
from kernelscan.markup.text import clean_text, wrapped
from kernelscan.markup.view import PlanView
from kernelscan.plan import Room

__all__ = ["Placement", "Tags", "number_tags", "place_tags", "placed_tags", "tags_around_marks"]

WIDEST_NAME = 36.0
"""A longer name is wrapped over two lines, in millimetres."""
NEAR = (SYMBOL_RADIUS + 0.3, SYMBOL_RADIUS + 1.0, SYMBOL_RADIUS + 2.0, SYMBOL_RADIUS + 3.5)
FAR = (6.0, 9.0, 13.0, 18.0, 24.0)
BAND, EDGE = (np.array([-border, -border, border, border]) for border in (WALL_BAND + 0.6, 0.7))
"""What is added to a box so that it keeps off the band of a wall zone, or at least off the line of the wall."""
OUTSIDE = (4.0, 8.0, 13.0, 19.0, 26.0, 34.0, 45.0, 60.0)


@dataclass(frozen=True, slots=True)
class Placement:
    """A label, the box it stands in, and the foot of its leader if it has one."""

    label: Label
    box: Box
    foot: Point | None = None

    @property
    def leader_end(self) -> Point:
        """Where a leader meets the box."""
        return nearest_in(self.foot, self.box) if self.foot is not None else self.box.centre

    def items(self) -> tuple[Item, ...]:
        """Return the label drawn, with its leader."""
        tied = () if self.foot is None else (Stroke((self.foot, self.leader_end), LEADER_PEN), dot(self.foot))
        return (*tied, *self.label.items(self.box))


class Tags:
    """What has been placed so far.

    Attributes
    ----------
    placements
        In painting order.
    missing
        What found no place, by room and letter.
    """

    def __init__(self, window: Box) -> None:
        self.placements: list[Placement] = []
        self.missing: list[str] = []
        self.taken = Occupied(window)
        """What no label may touch."""
        self.shy = Occupied(window)
        """What a label keeps off if it can: the borders of zones."""

    def put(self, label: Label, box: Box, foot: Point | None = None) -> None:
        """Give a label a box and keep the place, tied to a point by a leader where one is given."""
        self.taken.add(box)
        if foot is not None:
            self.taken.add_line(foot, nearest_in(foot, box))
        self.placements.append(Placement(label, box, foot))


@dataclass(frozen=True, slots=True, eq=False)
class _Place:
    """A room on the paper: its rings, points for the middle of its tag, and how far these are from walls."""

    shown: ShownRoom
    rings: tuple[np.ndarray, ...]
    middles: np.ndarray
    clearance: np.ndarray


def placed_tags(
    rooms: Sequence[ShownRoom], view: PlanView, custom: Custom, lines: Sequence[tuple[Point, Point]] = ()
) -> Tags:
    """Return every tag of the plan, none touching another, a symbol, a wall in conflict or one of the lines given."""
    tags = tags_around_marks(rooms, view)
    for line in lines:
        tags.taken.add_line(*line)
    place_tags(tags, rooms, view, custom)
    return tags


def tags_around_marks(rooms: Sequence[ShownRoom], view: PlanView) -> Tags:
    """Return no tags as yet, and the places of all symbols and walls in conflict taken."""
    tags = Tags(view.box)
    for room in rooms:
        _keep_marks_clear(room, view, tags)
    return tags


def place_tags(tags: Tags, rooms: Sequence[ShownRoom], view: PlanView, custom: Custom) -> None:
    """Place the letters and the tags of rooms where nothing is taken.

    A room too small for more than its number gets that first, and the letters of its points after it.
    """
    places = [_place(room, view) for room in rooms]
    waiting = []
    for place in places:
        cramped = not _has_room(place, custom, tags)
        placed = cramped and _place_inside(place, custom, tags)
        for letter, at, needed in _letters(place.shown, view):
            if tags.taken.shows(at):
                _place_letter(letter, at, needed, place, tags)
        if not placed and not _place_inside(place, custom, tags):
            waiting.append(place)
    outlines = np.concatenate([_edges(place.rings[0]) for place in places]) if places else np.empty((0, 4))
    for place in waiting:
        _place_outside(place, custom, outlines, tags)


def number_tags(rooms: Sequence[ShownRoom], view: PlanView, corners: Sequence[tuple[Label, Box]]) -> Tags:
    """Return labels in the upper left corners of boxes, and the numbers of the rooms as far as there is room."""
    tags = Tags(view.box)
    for _, box in corners:
        for start, end in zip(box.corners, box.corners[1:] + box.corners[:1], strict=True):
            tags.taken.add_line(start, end)
    for label, box in corners:
        tags.put(
            label, Box(box.left + 1, box.top - 1 - label.height, box.left + 1 + label.width, box.top - 1)
        )
    for room in rooms:
        label = Label((Line(room.room.id, bold=True),))
        for box in _inner_boxes(_place(room, view), label, EDGE):
            if tags.taken.takes(box):
                tags.put(label, box)
                break
    return tags


def _place(shown: ShownRoom, view: PlanView) -> _Place:
    rings = tuple(view.to_paper(ring) for ring in shown.room.rings)
    return _Place(shown, rings, *inner_points(rings))


def _keep_marks_clear(shown: ShownRoom, view: PlanView, tags: Tags) -> None:
    room = shown.basis.room
    for spot in shown.spots:
        at = view.point(spot.point)
        tags.taken.add(box_around(spot_ring(spot, at)))
        for line in aim_lines(spot, at):
            tags.taken.add_line(*line)
    if shown.tried is not None:
        tags.taken.add(box_around(tried_ring(view.point(shown.tried.best.point))))
    for nook in shown.nooks:
        for ring in corner_rings(room, nook, view):
            tags.shy.add(box_around(ring))
    for wall in shown.conflict:
        start, end = room.wall_ends(wall)
        foot, tip = seeing_arrow(room, wall, view)
        tags.taken.add_line(view.point(start), view.point(end))
        tags.taken.add(box_around((foot, tip)).grown(0.6))
    for _, feature in shown.features:
        for start_point, end_point in pairwise(view.ring(feature.chain)):
            tags.shy.add_line(start_point, end_point)
    for border in (view.ring(ring) for area in shown.areas for ring in area.rings):
        for start_point, end_point in zip(border, border[1:] + border[:1], strict=True):
            tags.shy.add_line(start_point, end_point)


def _letters(shown: ShownRoom, view: PlanView) -> Iterator[tuple[Label, Point, bool]]:
    """Yield letters, their places, and whether the sheet needs them: a point's symbol says the same by its shape."""
    for spot in shown.spots:
        needed = bool(shown.answer.devices)
        yield Label((Line(spot.tag, bold=True),)), view.point(spot.point), needed
    if shown.tried is not None:
        yield Label((Line(TRIED_LETTER, bold=True),)), view.point(shown.tried.best.point), False
    for letter, wall in zip(CONFLICT_LETTERS, shown.conflict, strict=False):
        foot, tip = seeing_arrow(shown.basis.room, wall, view)
        middle = (foot[0] + tip[0]) / 2, (foot[1] + tip[1]) / 2
        yield Label((Line(letter, bold=True, height=HEADING),)), middle, True
    for tag, feature in shown.features:
        yield Label((Line(tag),)), view.point(feature.middle), True


def _place_letter(letter: Label, at: Point, needed: bool, place: _Place, tags: Tags) -> None:
    """Place the letter of a point or a wall: beside it in its own room, there at the end of a leader, or elsewhere."""
    near = list(boxes_around(at, letter, NEAR, directions=16))
    within, roomy = (_those_inside(place, near, border) for border in (0.0, BAND))
    shy = [box for box in roomy if tags.shy.takes(box)]
    for box in (*shy, *roomy, *within):
        if tags.taken.takes(box):
            tags.put(letter, box)
            return
    if not needed:
        return
    far = list(boxes_around(at, letter, FAR, directions=16))
    tied = [box for box in _those_inside(place, far, EDGE) if tags.taken.takes_line(at, nearest_in(at, box))]
    for box in (*tied, *near, *far):
        if tags.taken.takes(box):
            tags.put(letter, box, at)
            return
    tags.missing.append(f"{place.shown.room.id} {letter.lines[0].string}")


def _those_inside(place: _Place, boxes: list[Box], border: np.ndarray | float) -> list[Box]:
    """Return the boxes that lie in a room with a border around them."""
    inside = boxes_inside(place.rings, np.array(boxes) + border)
    return [box for box, wholly in zip(boxes, inside, strict=True) if wholly]


def _variants(shown: ShownRoom, custom: Custom) -> Iterator[Label]:
    """Yield a room's tag, the fullest first; what is wanting is never left out."""
    number, name = Line(shown.room.id, bold=True), _name_lines(shown.room)
    area = Line(f"{custom.area(shown.room.area)} {custom.area_unit}")
    wanting = _wanting(shown)
    kernel = () if shown.basis.kernel.kind == "empty" else (_kernel_line(shown, custom),)
    yield Label((number, *name, area, *kernel, *wanting))
    yield Label((number, *name, *kernel, *wanting))
    yield Label((number, *name, *wanting))
    yield Label((number, *wanting))


def _wanting(shown: ShownRoom) -> tuple[Line, ...]:
    """What a reader must know of a room: that no point sees every wall, or that no device covers it."""
    words = []
    if shown.answer.zones.kernel.kind == "empty":
        tolerant = shown.answer.tolerant is not None and shown.basis.kernel.kind != "empty"
        words.append("exact: no single point" if tolerant else "no single point")
    if shown.is_uncovered:
        words.append("no device covers it")
    return tuple(Line(line) for line in words)


def _kernel_line(shown: ShownRoom, custom: Custom) -> Line:
    words = kernel_in_words(shown.basis, custom).removeprefix("area ")
    return Line(f"without features: {words}" if shown.features else f"kernel: {words}")


def _name_lines(room: Room) -> tuple[Line, ...]:
    if room.name_from == "number":
        return ()
    return tuple(Line(line) for line in wrapped(clean_text(room.name), WIDEST_NAME, 2.5, most=2))


def _has_room(place: _Place, custom: Custom, tags: Tags) -> bool:
    """Whether a room holds more than its number and name beside its symbols."""
    _, label, *_ = _variants(place.shown, custom)
    return any(tags.taken.takes(box) for box in _inner_boxes(place, label, EDGE))


def _inner_boxes(place: _Place, label: Label, border: np.ndarray) -> Iterator[Box]:
    """Yield boxes for a label that lie in the room with a border around them, the roomiest places first."""
    half = np.array([label.width, label.height]) / 2
    middles = place.middles[place.clearance >= half.min() + border[2]]
    boxes = np.column_stack([middles - half, middles + half])
    for sides in boxes[boxes_inside(place.rings, boxes + border)]:
        yield Box(*(float(side) for side in sides))


def _place_inside(place: _Place, custom: Custom, tags: Tags) -> bool:
    """Place the fullest tag that the room holds, off its walls and its zones' borders if it can."""
    for label in _variants(place.shown, custom):
        for border, shy in ((BAND, True), (EDGE, False)):
            for box in _inner_boxes(place, label, border):
                if tags.taken.takes(box) and not (shy and not tags.shy.takes(box.grown(0.8))):
                    tags.put(label, box)
                    return True
    return False


def _place_outside(place: _Place, custom: Custom, outlines: np.ndarray, tags: Tags) -> None:
    """Place a tag at the end of a leader: clear of every room if it can, else on a room, else note it as missing."""
    *_, with_name, _ = _variants(place.shown, custom)
    label = replace(with_name, framed=True)
    second: tuple[Box, Point] | None = None
    feet = _feet(place, tags)
    for foot in feet:
        for box in boxes_around(foot, label, OUTSIDE, directions=24):
            if tags.taken.takes(box) and tags.taken.takes_line(foot, nearest_in(foot, box)):
                if not _crosses(box, outlines):
                    tags.put(label, box, foot)
                    return
                second = second or (box, foot)
    if second is not None:
        tags.put(label, *second)
    elif feet:
        tags.missing.append(place.shown.room.id)


def _feet(place: _Place, tags: Tags) -> list[Point]:
    """Return a few points of a room where the foot of a leader touches nothing."""
    points = [point for point in map(_pair, place.middles) if tags.taken.shows(point)]
    free = [point for point in points if tags.taken.takes(Box(*point, *point).grown(0.6))]
    return (free or points)[:: max(1, len(free or points) // 4)]


def _edges(ring: np.ndarray) -> np.ndarray:
    return np.column_stack([ring, np.roll(ring, -1, axis=0)])


def _crosses(box: Box, edges: np.ndarray) -> bool:
    """Whether the box of an edge meets the box of a label: coarse, and on the safe side."""
    low, high = np.minimum(edges[:, :2], edges[:, 2:]), np.maximum(edges[:, :2], edges[:, 2:])
    meets = (low < (box.right, box.top)).all(axis=1) & (high > (box.left, box.bottom)).all(axis=1)
    return bool(meets.any())


def _pair(point: np.ndarray) -> Point:
    return float(point[0]), float(point[1])
