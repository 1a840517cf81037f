"""Doors and windows drawn in the walls of outlined rooms: which stretch of which wall each occupies, by hand."""

from collections.abc import Callable, Sequence
from itertools import pairwise
from math import atan2, cos, degrees, pi, radians, sin, tan
from pathlib import Path

import numpy as np
import pytest
from ezdxf.layouts import BaseLayout, Modelspace
from ezdxf.math import Matrix44
from ezdxf.transform import inplace
from reading.drawings import saved

from kernelscan.coverage import room_zones
from kernelscan.geometry.rings import as_ring
from kernelscan.plan import Opening, Plan, Room, WallRef
from kernelscan.reading import read_plan
from kernelscan.reading.drawn_openings import with_drawn
from kernelscan.reading.opening_spans import merged_spans
from kernelscan.reading.segments import DOOR, WINDOW

Pair = tuple[float, float]
Draw = Callable[[BaseLayout], None]
Found = list[tuple[str, Pair, Pair]]

ROOM = [(0, 0), (6, 0), (6, 4), (0, 4)]
NEXT = [(6.2, 0), (9.2, 0), (9.2, 4), (6.2, 4)]
METRE, FOOT = 6, 2


def line(layer: str, *points: Pair) -> Draw:
    def draw(space: BaseLayout) -> None:
        for start, end in pairwise(points):
            space.add_line(start, end, dxfattribs={"layer": layer})

    return draw


def closed(layer: str, points: Sequence[Sequence[float]]) -> Draw:
    def draw(space: BaseLayout) -> None:
        triples = [(p[0], p[1], p[2] if len(p) == 3 else 0) for p in points]
        space.add_lwpolyline(triples, format="xyb", close=True, dxfattribs={"layer": layer})

    return draw


def box(layer: str, x0: float, y0: float, x1: float, y1: float) -> Draw:
    return closed(layer, [(x0, y0), (x1, y0), (x1, y1), (x0, y1)])


def arc(layer: str, hinge: Pair, radius: float, start: float, end: float) -> Draw:
    def draw(space: BaseLayout) -> None:
        space.add_arc(hinge, radius, start, end, dxfattribs={"layer": layer})

    return draw


def plan_of(
    folder: Path,
    rooms: Sequence[Sequence[Sequence[float]]],
    *drawn: Draw,
    unit: int = METRE,
    turned: Matrix44 | None = None,
) -> Plan:
    """Read a drawing of rooms and what is drawn besides, all of it moved by a matrix."""

    def draw(space: Modelspace) -> None:
        for each in [*(closed("A-AREA", room) for room in rooms), *drawn]:
            each(space)
        if turned is not None:
            inplace(space, turned)

    return read_plan(saved(folder / "plan.dxf", draw, unit=unit))


def found_in(room: Room, scale: float = 1.0) -> Found:
    """Return the openings of a room: kind and ends, those first that begin lower or farther left."""
    found = []
    for opening in room.openings:
        ends = np.round(room.opening_ends(opening) * scale, 6) + 0.0
        assert opening.width == pytest.approx(np.hypot(*(ends[1] - ends[0])) / scale, abs=2e-6)
        low, high = sorted(map(tuple, ends.tolist()))
        found.append((opening.kind, low, high))
    return sorted(found, key=lambda each: each[1:])


def openings(folder: Path, *drawn: Draw, room: Sequence[Sequence[float]] = ROOM) -> Found:
    """Return the openings of a plan of one room."""
    (only,) = plan_of(folder, [room], *drawn).rooms
    return found_in(only)


WAYS = {
    "one line on the face": ([line("A-GLAZ", (1, 0), (3, 0))], [("window", (1, 0), (3, 0))]),
    "one line amid the wall": ([line("A-GLAZ", (1, -0.15), (3, -0.15))], [("window", (1, 0), (3, 0))]),
    "a line on the outer face": ([line("A-GLAZ", (1, -0.55), (3, -0.55))], [("window", (1, 0), (3, 0))]),
    "double lines": (
        [line("A-GLAZ", (1, -0.12), (3, -0.12)), line("A-GLAZ", (3, -0.18), (1, -0.18))],
        [("window", (1, 0), (3, 0))],
    ),
    "a rectangle through the wall": ([box("A-DOOR", 2, -0.3, 2.9, 0)], [("door", (2, 0), (2.9, 0))]),
    "a slit less wide than its wall is thick": (
        [box("A-GLAZ", 2, -0.5, 2.2, 0)],
        [("window", (2, 0), (2.2, 0))],
    ),
    "a leaf and its arc": (
        [line("A-DOOR", (2, 0), (2, 0.9)), arc("A-DOOR", (2, 0), 0.9, 0, 90)],
        [("door", (2, 0), (2.9, 0))],
    ),
    "a leaf and its arc on the other side": (
        [line("A-DOOR", (2, -0.3), (2, -1.2)), arc("A-DOOR", (2, -0.3), 0.9, 270, 360)],
        [("door", (2, 0), (2.9, 0))],
    ),
    "a leaf with a thickness and its arc": (
        [box("A-DOOR", 2, 0, 2.04, 0.9), arc("A-DOOR", (2, 0), 0.9, 0, 90)],
        [("door", (2, 0), (2.9, 0))],
    ),
    "an arc alone": ([arc("A-DOOR", (2, 0), 0.9, 0, 90)], [("door", (2, 0), (2.9, 0))]),
    "an arc of 45 degrees and its leaf": (
        [
            line("A-DOOR", (2, 0), (2 + 0.9 * cos(pi / 4), 0.9 * sin(pi / 4))),
            arc("A-DOOR", (2, 0), 0.9, 0, 45),
        ],
        [("door", (2, 0), (2.9, 0))],
    ),
    "an arc as a bulge, with its leaf in one polyline": (
        [
            lambda space: space.add_lwpolyline(
                [(2, 0, 0), (2, 0.9, -(2**0.5 - 1)), (2.9, 0, 0)],
                format="xyb",
                dxfattribs={"layer": "A-DOOR"},
            )
        ],
        [("door", (2, 0), (2.9, 0))],
    ),
    "two leaves": (
        [
            line("A-DOOR", (2, 0), (2, 0.8)),
            arc("A-DOOR", (2, 0), 0.8, 0, 90),
            line("A-DOOR", (3.6, 0), (3.6, 0.8)),
            arc("A-DOOR", (3.6, 0), 0.8, 90, 180),
        ],
        [("door", (2, 0), (3.6, 0))],
    ),
    "panes with posts between": (
        [line("A-GLAZ", (1 + k, -0.1), (1.95 + k, -0.1)) for k in range(3)],
        [("window", (1, 0), (3.95, 0))],
    ),
    "two windows with a pier between": (
        [line("A-GLAZ", (1, -0.1), (2, -0.1)), line("A-GLAZ", (2.3, -0.1), (3, -0.1))],
        [("window", (1, 0), (2, 0)), ("window", (2.3, 0), (3, 0))],
    ),
    "a door in a glazed front": (
        [line("A-GLAZ", (1, -0.1), (5, -0.1)), arc("A-DOOR", (2, 0), 0.9, 0, 90)],
        [("window", (1, 0), (2, 0)), ("door", (2, 0), (2.9, 0)), ("window", (2.9, 0), (5, 0))],
    ),
    "a door with a narrow strip of glass": (
        [line("A-GLAZ", (1.9, -0.1), (2.9, -0.1)), arc("A-DOOR", (2, 0), 0.9, 0, 90)],
        [("door", (1.9, 0), (2.9, 0))],
    ),
    "frames, to be widened to the jambs": (
        [
            line("A-GLAZ", (1.06, -0.1), (2.94, -0.1)),
            line("A-WALL", (1, 0), (1, -0.3)),
            line("A-WALL", (3, 0), (3, -0.3)),
        ],
        [("window", (1, 0), (3, 0))],
    ),
    "a leaf alone, its jambs beside it": (
        [
            line("A-DOOR", (2, 0), (2, 0.88)),
            line("A-WALL", (2, 0), (2, -0.3)),
            line("A-WALL", (2.9, 0), (2.9, -0.3)),
        ],
        [("door", (2, 0), (2.9, 0))],
    ),
    "a leaf alone beside a window": (
        [
            line("A-DOOR", (2, 0), (2, 0.9)),
            line("A-WALL", (2.9, 0), (2.9, -0.3)),
            line("A-GLAZ", (4, -0.1), (5, -0.1)),
        ],
        [("door", (2, 0), (2.9, 0)), ("window", (4, 0), (5, 0))],
    ),
    "names in other languages": (
        [line("FENSTER", (1, -0.1), (2, -0.1)), arc("Türen", (3, 0), 0.9, 0, 90)],
        [("window", (1, 0), (2, 0)), ("door", (3, 0), (3.9, 0))],
    ),
}


@pytest.mark.parametrize("way", WAYS)
def test_ways_of_drawing(way: str, tmp_path: Path) -> None:
    drawn, expected = WAYS[way]
    assert openings(tmp_path, *drawn) == expected


NO_OPENINGS = {
    "nothing drawn": [],
    "a chair": [line("I-FURN", (1, -0.1), (3, -0.1))],
    "a wall line": [line("A-WALL", (1, -0.3), (3, -0.3))],
    "a line farther off than a wall is thick": [line("A-GLAZ", (1, -0.7), (3, -0.7))],
    "a line in the room": [line("A-GLAZ", (1, 0.3), (3, 0.3))],
    "a line at three degrees": [line("A-GLAZ", (1, -0.1), (3, -0.1 - 2 * sin(radians(3))))],
    "a line beyond the corner": [line("A-GLAZ", (6.1, -0.1), (8, -0.1))],
    "a line that ends just past the corner": [line("A-GLAZ", (5.95, -0.1), (8, -0.1))],
    "a leaf alone, to neither side of which a jamb stands": [line("A-DOOR", (2, 0), (2, 0.9))],
}


@pytest.mark.parametrize("way", NO_OPENINGS)
def test_what_is_no_opening(way: str, tmp_path: Path) -> None:
    assert openings(tmp_path, *NO_OPENINGS[way]) == []


LEAVES = {
    "leaf alone": ([line("A-DOOR", (0.1, 0), (0.1, 0.9))], []),
    "leaf and arc": (
        [line("A-DOOR", (0.1, 0), (0.1, 0.9)), arc("A-DOOR", (0.1, 0), 0.9, 0, 90)],
        [("door", (0.1, 0), (1, 0))],
    ),
    "arc alone": ([arc("A-DOOR", (0.1, 0), 0.9, 0, 90)], [("door", (0.1, 0), (1, 0))]),
    "hinge in the corner": (
        [line("A-DOOR", (0, 0), (0, 0.9)), arc("A-DOOR", (0, 0), 0.9, 0, 90)],
        [("door", (0, 0), (0.9, 0))],
    ),
    "hinge in the corner, leaf beside it": (
        [line("A-DOOR", (0.04, 0), (0.04, 0.9)), arc("A-DOOR", (0, 0), 0.9, 0, 90)],
        [("door", (0, 0), (0.9, 0))],
    ),
}


@pytest.mark.parametrize("way", LEAVES)
def test_open_leaf_is_no_opening_of_the_wall_that_it_stands_beside(way: str, tmp_path: Path) -> None:
    drawn, expected = LEAVES[way]
    beside = [(-3.2, 0), (-0.2, 0), (-0.2, 4), (-3.2, 4)]
    own, neighbour = plan_of(tmp_path, [ROOM, beside], *drawn).rooms
    assert found_in(own) == expected
    assert not neighbour.openings


L_ROOM = [(0, 0), (6, 0), (6, 2), (3, 2), (3, 4), (0, 4)]


@pytest.mark.parametrize(
    "drawn",
    [
        pytest.param([box("A-DOOR", 3.1, 2, 4.0, 2.3)], id="rectangle"),
        pytest.param([box("A-DOOR", 3.1, 2.08, 4.0, 2.25)], id="rectangle amid the wall"),
        pytest.param(
            [
                line("A-DOOR", (3.1, 2), (3.1, 2.3)),
                line("A-DOOR", (4.0, 2), (4.0, 2.3)),
                line("A-DOOR", (3.1, 2.1), (4.0, 2.1)),
            ],
            id="lines",
        ),
    ],
)
def test_jamb_behind_another_wall_is_no_opening_of_that(drawn: list[Draw], tmp_path: Path) -> None:
    assert openings(tmp_path, *drawn, room=L_ROOM) == [("door", (3.1, 2), (4.0, 2))]


def test_opening_wider_than_its_wall_ends_with_it(tmp_path: Path) -> None:
    assert openings(tmp_path, line("A-GLAZ", (-1, -0.1), (7, -0.1))) == [("window", (0, 0), (6, 0))]


def test_window_round_a_corner_is_on_both_walls(tmp_path: Path) -> None:
    drawn = line("A-GLAZ", (4, -0.1), (6.1, -0.1), (6.1, 1.5))
    assert openings(tmp_path, drawn) == [("window", (4, 0), (6, 0)), ("window", (6, 0), (6, 1.5))]


def test_wall_that_a_vertex_splits_carries_a_part_on_either_side(tmp_path: Path) -> None:
    split = [(0, 0), (2, 0), (6, 0), (6, 4), (0, 4)]
    found = openings(tmp_path, line("A-GLAZ", (1, -0.1), (3, -0.1)), room=split)
    assert found == [("window", (1, 0), (2, 0)), ("window", (2, 0), (3, 0))]


@pytest.mark.parametrize(
    "drawn",
    [
        pytest.param([line("A-DOOR", (6.1, 1), (6.1, 1.9))], id="line amid the wall"),
        pytest.param([box("A-DOOR", 6, 1, 6.2, 1.9)], id="rectangle"),
        pytest.param([line("A-DOOR", (6.2, 1), (7.1, 1)), arc("A-DOOR", (6.2, 1), 0.9, 0, 90)], id="swing"),
    ],
)
def test_both_rooms_have_the_openings_of_the_wall_that_they_share(drawn: list[Draw], tmp_path: Path) -> None:
    first, second = plan_of(tmp_path, [ROOM, NEXT], *drawn).rooms
    assert found_in(first) == [("door", (6, 1), (6, 1.9))]
    assert found_in(second) == [("door", (6.2, 1), (6.2, 1.9))]


def test_outlines_along_the_middle_of_the_walls(tmp_path: Path) -> None:
    beside = [(6, 0), (9, 0), (9, 4), (6, 4)]
    swing = [line("A-DOOR", (6.1, 1), (7, 1)), arc("A-DOOR", (6.1, 1), 0.9, 0, 90)]
    first, second = plan_of(tmp_path, [ROOM, beside], *swing).rooms
    assert found_in(first) == found_in(second) == [("door", (6, 1), (6, 1.9))]


def test_room_between_keeps_an_opening_from_the_room_behind_it(tmp_path: Path) -> None:
    duct = [(6.05, 0), (6.5, 0), (6.5, 4), (6.05, 4)]
    first, second = plan_of(tmp_path, [ROOM, duct], line("A-GLAZ", (6.55, 1), (6.55, 2))).rooms
    assert not first.openings
    assert found_in(second) == [("window", (6.5, 1), (6.5, 2))]


def door_block(folder: Path, layer: str, name: str, **placed: float) -> Plan:
    """Read a room with a block of a leaf and its arc on layer 0, inserted at (2, 0)."""

    def draw(space: BaseLayout) -> None:
        assert isinstance(space, Modelspace)
        block = space.doc.blocks.new(name)
        block.add_line((0, 0), (0, 0.9))
        block.add_arc((0, 0), 0.9, 0, 90)
        space.add_blockref(name, (2, 0), dxfattribs={"layer": layer, **placed})

    return plan_of(folder, [ROOM], draw)


@pytest.mark.parametrize(("layer", "name"), [("A-DOOR", "B7"), ("0", "Door single 90")])
def test_block_with_a_swing(layer: str, name: str, tmp_path: Path) -> None:
    (room,) = door_block(tmp_path, layer, name).rooms
    assert found_in(room) == [("door", (2, 0), (2.9, 0))]


def test_block_mirrored_and_stretched(tmp_path: Path) -> None:
    (room,) = door_block(tmp_path, "A-DOOR", "B7", xscale=-1.1, yscale=1.1).rooms
    assert found_in(room) == [("door", (1.01, 0), (2, 0))]


@pytest.mark.parametrize(("layer", "name"), [("0", "B7"), ("A-DOOR", "Furniture cupboard")])
def test_block_that_is_no_door(layer: str, name: str, tmp_path: Path) -> None:
    (room,) = door_block(tmp_path, layer, name).rooms
    assert not room.openings


def round_span(room: Room) -> tuple[float, float, float]:
    """Return from which angle to which the openings reach round the origin, and their whole width."""
    ends = np.concatenate([room.opening_ends(opening) for opening in room.openings])
    angles = [degrees(atan2(y, x)) for x, y in ends.tolist()]
    return min(angles), max(angles), sum(opening.width for opening in room.openings)


@pytest.mark.parametrize(
    "drawn",
    [
        pytest.param([arc("A-GLAZ", (0, 0), 3.15, -20, 20)], id="arc amid the wall"),
        pytest.param([arc("A-GLAZ", (0, 0), r, -20, 20) for r in (3.1, 3.2)], id="two arcs"),
    ],
)
def test_window_in_a_curved_wall_lies_on_several_edges(drawn: list[Draw], tmp_path: Path) -> None:
    circle = [(3, 0, 1), (-3, 0, 1)]
    (room,) = plan_of(tmp_path, [circle], *drawn).rooms
    low, high, width = round_span(room)
    assert len(room.openings) > 5
    assert (low, high) == pytest.approx((-20, 20), abs=0.2)
    assert width == pytest.approx(3 * radians(40), abs=0.02)


def test_straight_door_line_in_a_curved_wall(tmp_path: Path) -> None:
    circle = [(3, 0, 1), (-3, 0, 1)]
    (room,) = plan_of(tmp_path, [circle], line("A-DOOR", (2.98, -0.5), (2.98, 0.5))).rooms
    low, high, _ = round_span(room)
    assert (low, high) == pytest.approx((-degrees(0.5 / 3), degrees(0.5 / 3)), abs=0.3)


def test_leaf_at_a_joint_of_a_curved_wall_is_no_opening_of_a_straight_one(tmp_path: Path) -> None:
    half_round = [(-2, 0), (2, 0, 1)]
    (plain,) = plan_of(tmp_path, [half_round]).rooms
    x, y = plain.outline[np.hypot(*(plain.outline - (2, 0)).T).argsort()[1]].tolist()
    assert 0.05 < y < 0.15
    (room,) = plan_of(tmp_path, [half_round], line("A-DOOR", (x, y), (x - 0.9, y))).rooms
    assert not room.openings


def test_arc_beside_a_curved_wall_is_no_opening_of_it(tmp_path: Path) -> None:
    east = [(4 * cos(radians(a)), 4 * sin(radians(a))) for a in (-60, 60)]
    west = [(x * 3 / 4, y * 3 / 4) for x, y in east]
    bulge = tan(radians(30))
    corridor = [(*east[0], bulge), east[1], (*west[1], -bulge), west[0]]
    (room,) = plan_of(tmp_path, [corridor], arc("A-DOOR", (4, 0), 0.9, 96, 180)).rooms
    ends = np.concatenate([room.opening_ends(opening) for opening in room.openings])
    assert sum(opening.width for opening in room.openings) == pytest.approx(0.9, abs=0.01)
    assert np.hypot(*ends.T).min() > 3.99


def test_window_in_a_turret_no_wider_than_a_door_swings(tmp_path: Path) -> None:
    circle = [(1.2, 0, 1), (-1.2, 0, 1)]
    (room,) = plan_of(tmp_path, [circle], arc("A-GLAZ", (0, 0), 1.35, -40, 40)).rooms
    low, high, _ = round_span(room)
    assert {opening.kind for opening in room.openings} == {"window"}
    assert (low, high) == pytest.approx((-40, 40), abs=0.3)


EVERY_WAY = [
    line("A-GLAZ", (1, -0.12), (3, -0.12)),
    box("A-DOOR", 4, -0.3, 4.9, 0),
    line("A-DOOR", (6.2, 1), (7.1, 1)),
    arc("A-DOOR", (6.2, 1), 0.9, 0, 90),
    line("A-GLAZ", (2, 4.1), (7, 4.1)),
]


@pytest.mark.parametrize("mirror", [1, -1])
@pytest.mark.parametrize("angle", [0, 17.5, 90, 200])
@pytest.mark.parametrize("at", [(0, 0), (512_300, 5_403_700)])
def test_openings_move_with_the_drawing(mirror: int, angle: float, at: Pair, tmp_path: Path) -> None:
    turned = Matrix44.chain(
        Matrix44.scale(mirror, 1, 1), Matrix44.z_rotate(radians(angle)), Matrix44.translate(*at, 0)
    )
    plain = plan_of(tmp_path, [ROOM, NEXT], *EVERY_WAY)
    moved = plan_of(tmp_path, [ROOM, NEXT], *EVERY_WAY, turned=turned)
    for room, other in zip(plain.rooms, moved.rooms, strict=True):
        expected = [
            (kind, *sorted(tuple(turned.transform((*end, 0)).vec2) for end in ends))
            for kind, *ends in found_in(room)
        ]
        got = [(kind, *sorted(ends)) for kind, *ends in found_in(other)]
        assert len(got) == len(expected) > 1
        for each in expected:
            assert any(
                each[0] == kind and np.allclose(each[1:], ends, rtol=0, atol=1e-5) for kind, *ends in got
            )


def test_feet(tmp_path: Path) -> None:
    room = [(x * 3, y * 3) for x, y in ROOM]
    drawn = [line("A-GLAZ", (3, -0.4), (9, -0.4)), arc("A-DOOR", (12, 0), 3, 0, 90)]
    (only,) = plan_of(tmp_path, [room], *drawn, unit=FOOT).rooms
    assert found_in(only, 1 / 0.3048) == [("window", (3, 0), (9, 0)), ("door", (12, 0), (15, 0))]
    assert sorted(opening.width for opening in only.openings) == pytest.approx([3 * 0.3048, 6 * 0.3048])


def test_outline_stays_as_it_is_drawn(tmp_path: Path) -> None:
    (room,) = plan_of(tmp_path, [ROOM], *EVERY_WAY).rooms
    assert room.outline.tolist() == [list(map(float, corner)) for corner in ROOM]


def test_nothing_is_recommended_on_glass(tmp_path: Path) -> None:
    glass = [line("A-GLAZ", (1, -0.1), (5, -0.1)), line("A-GLAZ", (6.1, 0.5), (6.1, 3.5))]
    (room,) = plan_of(tmp_path, [ROOM], *glass).rooms
    for zone in room_zones(room).walls:
        for ends in pairwise(zone.path.tolist()):
            x, y = np.mean(ends, axis=0)
            assert not (y == 0 and 1 < x < 5)
            assert not (x == 6 and 0.5 < y < 3.5)


def test_walls_without_outlines_have_windows_too(tmp_path: Path) -> None:
    """Wall lines that run on past a window close the room; the window in them is found as well."""

    def draw(space: Modelspace) -> None:
        for each in (
            line("A-WALL", (3, 0), (6, 0), (6, 4), (0, 4), (0, 0), (2.1, 0)),
            line("A-WALL", (-0.3, -0.3), (2.1, -0.3)),
            line("A-WALL", (3, -0.3), (6.3, -0.3), (6.3, 4.3), (-0.3, 4.3), (-0.3, -0.3)),
            line("A-WALL", (2.1, 0), (2.1, -0.3)),
            line("A-WALL", (3, 0), (3, -0.3)),
            arc("A-DOOR", (2.1, 0), 0.9, 0, 90),
            line("A-DOOR", (2.1, 0), (2.1, 0.9)),
            line("A-GLAZ", (1, 4.1), (3, 4.1)),
        ):
            each(space)

    (room,) = read_plan(saved(tmp_path / "walls.dxf", draw)).rooms
    assert found_in(room) == [("window", (1, 4), (3, 4)), ("door", (2.1, 0), (3, 0))]


def test_short_walls_beside_a_known_opening_are_its_jambs() -> None:
    ring = as_ring([(0, 0), (2, 0), (2, -0.2), (3, -0.2), (3, 0), (6, 0), (6, 4), (0, 4)])
    known = Opening(WallRef(0, 2), "door", 1.0)
    window = Opening(WallRef(0, 6), "window", 2.0, (0.25, 0.5))
    drawn = [Opening(WallRef(0, edge), "door", 0.2) for edge in (1, 2, 3)]
    assert with_drawn([known], [*drawn, window], ring, 0.6) == (known, window)
    assert with_drawn([], [*drawn, window], ring, 0.6) == (*drawn, window)


@pytest.mark.parametrize(
    ("spans", "expected"),
    [
        ([(0.003, 1, WINDOW)], [(0, 1, WINDOW)]),
        ([(1, 3.998, WINDOW)], [(1, 4, WINDOW)]),
        ([(0, 2, WINDOW), (0.5, 1, WINDOW), (1.5, 3, WINDOW)], [(0, 3, WINDOW)]),
        ([(0, 3, DOOR), (1, 2, WINDOW)], [(0, 3, DOOR)]),
        ([(0, 4, WINDOW), (1, 2, DOOR), (2.5, 3.5, DOOR)], None),
    ],
)
def test_spans_of_one_wall(
    spans: list[tuple[float, float, int]], expected: list[tuple[float, float, int]] | None
) -> None:
    beside = [(0, 1, WINDOW), (1, 2, DOOR), (2, 2.5, WINDOW), (2.5, 3.5, DOOR), (3.5, 4, WINDOW)]
    assert merged_spans(spans, 4, 0.005) == (expected or beside)


def test_broken_drawings_end_in_a_plan(tmp_path: Path) -> None:
    def odd(space: BaseLayout) -> None:
        attributes = {"layer": "A-DOOR"}
        space.add_line((1, 0), (1, 0), dxfattribs=attributes)
        space.add_lwpolyline([(2, 0), (2, 0), (2, 0)], dxfattribs=attributes)
        space.add_arc((3, 0), 1e9, 0, 90, dxfattribs=attributes)
        space.add_line((-1e11, 0), (1e11, 0), dxfattribs=attributes)
        space.add_circle((4, 0), 0.9, dxfattribs=attributes)

    found = openings(tmp_path, odd)
    assert found == [("door", (0, 0), (6, 0))]
