"""The tags of the plan: letters at the points and at the walls in conflict, and one tag a room.

A room's tag says as much as its room holds: number, name, area and kernel; else without the area; else number and
name; else the number, and always that no point sees every wall where that is so. Where not even that fits, the tag
stands outside at the end of a leader line. What finds no place at all is returned by name, so that the sheet can say
so.
"""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace

import numpy as np

from kernelscan.coverage import RoomZones
from kernelscan.coverage.wording import Custom, kernel_in_words
from kernelscan.markup.drawing import conflict_walls, corner_rings, seeing_arrow
from kernelscan.markup.labels import Label, Line, boxes_around, dot, nearest_in
from kernelscan.markup.placing import Occupied, boxes_inside, inner_points
from kernelscan.markup.scene import Box, Item, Point, Stroke
from kernelscan.markup.style import CONFLICT_LETTERS, HEADING, LEADER_PEN, MARKS, SYMBOL_RADIUS, WALL_BAND
from kernelscan.markup.symbols import box_around, spot_ring
from kernelscan.markup.text import clean_text, wrapped
from kernelscan.markup.view import PlanView

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
    """A room on the paper: its answer, its rings, points for the middle of its tag and how far they are from walls."""

    zones: RoomZones
    rings: tuple[np.ndarray, ...]
    middles: np.ndarray
    clearance: np.ndarray


def placed_tags(
    answers: Sequence[RoomZones], view: PlanView, custom: Custom, lines: Sequence[tuple[Point, Point]] = ()
) -> Tags:
    """Return every tag of the plan, none touching another, a symbol, a wall in conflict or one of the lines given."""
    tags = tags_around_marks(answers, view)
    for line in lines:
        tags.taken.add_line(*line)
    place_tags(tags, answers, view, custom)
    return tags


def tags_around_marks(answers: Sequence[RoomZones], view: PlanView) -> Tags:
    """Return no tags as yet, and the places of all symbols and walls in conflict taken."""
    tags = Tags(view.box)
    for zones in answers:
        _keep_marks_clear(zones, view, tags)
    return tags


def place_tags(tags: Tags, answers: Sequence[RoomZones], view: PlanView, custom: Custom) -> None:
    """Place the letters and the tags of rooms where nothing is taken.

    A room too small for more than its number gets that first, and the letters of its points after it.
    """
    places = [_place(zones, view) for zones in answers]
    waiting = []
    for place in places:
        cramped = not _has_room(place, custom, tags)
        placed = cramped and _place_inside(place, custom, tags)
        for letter, at, needed in _letters(place.zones, view):
            if tags.taken.shows(at):
                _place_letter(letter, at, needed, place, tags)
        if not placed and not _place_inside(place, custom, tags):
            waiting.append(place)
    outlines = np.concatenate([_edges(place.rings[0]) for place in places]) if places else np.empty((0, 4))
    for place in waiting:
        _place_outside(place, custom, outlines, tags)


def number_tags(answers: Sequence[RoomZones], view: PlanView, corners: Sequence[tuple[Label, Box]]) -> Tags:
    """Return labels in the upper left corners of boxes, and the numbers of the rooms as far as there is room."""
    tags = Tags(view.box)
    for _, box in corners:
        for start, end in zip(box.corners, box.corners[1:] + box.corners[:1], strict=True):
            tags.taken.add_line(start, end)
    for label, box in corners:
        tags.put(
            label, Box(box.left + 1, box.top - 1 - label.height, box.left + 1 + label.width, box.top - 1)
        )
    for zones in answers:
        label = Label((Line(zones.room.id, bold=True),))
        for box in _inner_boxes(_place(zones, view), label, EDGE):
            if tags.taken.takes(box):
                tags.put(label, box)
                break
    return tags


def _place(zones: RoomZones, view: PlanView) -> _Place:
    rings = tuple(view.to_paper(ring) for ring in zones.room.rings)
    return _Place(zones, rings, *inner_points(rings))


def _keep_marks_clear(zones: RoomZones, view: PlanView, tags: Tags) -> None:
    for spot in zones.recommended:
        tags.taken.add(box_around(spot_ring(spot, view.point(spot.point))))
    for corner in zones.corners:
        for ring in corner_rings(zones.room, corner, view):
            tags.shy.add(box_around(ring))
    for wall in conflict_walls(zones):
        start, end = zones.room.wall_ends(wall)
        foot, tip = seeing_arrow(zones.room, wall, view)
        tags.taken.add_line(view.point(start), view.point(end))
        tags.taken.add(box_around((foot, tip)).grown(0.6))
    ceiling = view.ring(zones.ceiling.vertices) if zones.ceiling is not None else ()
    for start_point, end_point in zip(ceiling, ceiling[1:] + ceiling[:1], strict=True):
        tags.shy.add_line(start_point, end_point)


def _letters(zones: RoomZones, view: PlanView) -> Iterator[tuple[Label, Point, bool]]:
    """Yield letters, their places, and whether the sheet needs them: a point's symbol says the same by its shape."""
    for spot in zones.recommended:
        yield Label((Line(MARKS[spot.mount].letter, bold=True),)), view.point(spot.point), False
    for letter, wall in zip(CONFLICT_LETTERS, conflict_walls(zones), strict=False):
        foot, tip = seeing_arrow(zones.room, wall, view)
        middle = (foot[0] + tip[0]) / 2, (foot[1] + tip[1]) / 2
        yield Label((Line(letter, bold=True, height=HEADING),)), middle, True


def _place_letter(letter: Label, at: Point, needed: bool, place: _Place, tags: Tags) -> None:
    """Place the letter of a point or a wall beside it, in its own room and off the zones' borders if it can."""
    near = list(boxes_around(at, letter, NEAR, directions=16))
    within, roomy = (
        [
            box
            for box, wholly in zip(near, boxes_inside(place.rings, np.array(near) + border), strict=True)
            if wholly
        ]
        for border in (0.0, BAND)
    )
    shy = [box for box in roomy if tags.shy.takes(box)]
    for box in (*shy, *roomy, *within, *(near if needed else ())):
        if tags.taken.takes(box):
            tags.put(letter, box)
            return
    if not needed:
        return
    for box in boxes_around(at, letter, FAR, directions=16):
        if tags.taken.takes(box):
            tags.put(letter, box, at)
            return
    tags.missing.append(f"{place.zones.room.id} {letter.lines[0].string}")


def _variants(zones: RoomZones, custom: Custom) -> Iterator[Label]:
    """Yield a room's tag, the fullest first; that no point sees every wall is never left out."""
    number, name = Line(zones.room.id, bold=True), _name_lines(zones)
    area = Line(f"{custom.area(zones.room.area)} {custom.area_unit}")
    kernel = _kernel_line(zones, custom)
    needed = (kernel,) if zones.kernel.kind == "empty" else ()
    yield Label((number, *name, area, kernel))
    yield Label((number, *name, kernel))
    yield Label((number, *name, *needed))
    yield Label((number, *needed))


def _kernel_line(zones: RoomZones, custom: Custom) -> Line:
    words = kernel_in_words(zones, custom)
    return Line(words if zones.kernel.kind == "empty" else f"kernel: {words.removeprefix('area ')}")


def _name_lines(zones: RoomZones) -> tuple[Line, ...]:
    if zones.room.name_from == "number":
        return ()
    name = clean_text(zones.room.name)
    return tuple(Line(line) for line in wrapped(name, WIDEST_NAME, 2.5, most=2))


def _has_room(place: _Place, custom: Custom, tags: Tags) -> bool:
    """Whether a room holds more than its number and name beside its symbols."""
    _, label, *_ = _variants(place.zones, custom)
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
    for label in _variants(place.zones, custom):
        for border, shy in ((BAND, True), (EDGE, False)):
            for box in _inner_boxes(place, label, border):
                if tags.taken.takes(box) and not (shy and not tags.shy.takes(box.grown(0.8))):
                    tags.put(label, box)
                    return True
    return False


def _place_outside(place: _Place, custom: Custom, outlines: np.ndarray, tags: Tags) -> None:
    """Place a tag at the end of a leader: clear of every room if it can, else on a room, else note it as missing."""
    *_, with_name, _ = _variants(place.zones, custom)
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
        tags.missing.append(place.zones.room.id)


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
