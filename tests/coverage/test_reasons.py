"""Why no point sees every wall: the words, the figures beside them, and what the search may claim."""

from math import pi

import numpy as np
import polygons
import pytest

from kernelscan.coverage.best_point import TRIED, best_point
from kernelscan.coverage.features import simplified
from kernelscan.coverage.reasons import why_no_point
from kernelscan.coverage.wall_names import WallName, joined, wall_names
from kernelscan.errors import GeometryError
from kernelscan.geometry.kernel import kernel_of_rings
from kernelscan.geometry.rings import as_rings
from kernelscan.geometry.visible import view_from
from kernelscan.plan import Obstacle, Opening, Room, WallRef

PILASTER = [(0, 0), (2.8, 0), (2.8, 0.2), (3.2, 0.2), (3.2, 0), (6, 0), (6, 4), (0, 4)]
PLINTH = [(0, 0), (6, 0), (6, 4), (4, 4), (4, 3.98), (2, 3.98), (2, 4), (0, 4)]
U_ROOM = [(0, 0), (9, 0), (9, 6), (6, 6), (6, 3), (3, 3), (3, 6), (0, 6)]
RECTANGLE = [(0, 0), (6, 0), (6, 4), (0, 4)]
COLUMN = [(3.4, 1.8), (3.8, 1.8), (3.8, 2.2), (3.4, 2.2)]
REVEALS = [
    *[(0, 0), (3, 0), (3, -0.25), (4, -0.25), (4, 0), (8, 0)],
    *[(8, 5), (6, 5), (6, 5.25), (5, 5.25), (5, 5), (0, 5)],
]


def room(points, holes=(), openings=()):
    outline, *rings = as_rings(points, holes)
    return Room("R001", "room", outline, tuple(map(Obstacle, rings)), tuple(openings))


def reasons(of):
    return why_no_point(of, kernel_of_rings(of.rings))


def names(of, *walls, depth=0.5):
    found = wall_names(of, [WallRef(*wall) for wall in walls], simplified(of, depth).features)
    return [str(name) for name in found]


def test_pilaster():
    why = reasons(room(PILASTER))
    assert why.because == (
        "The west side and the east side of the pilaster in the south wall face away from each other.",
    )
    assert [wall.wall for wall in why.conflict] == [WallRef(0, 1), WallRef(0, 3)]
    assert [wall.length for wall in why.conflict] == pytest.approx([0.2, 0.2])
    assert [wall.faces.tolist() for wall in why.conflict] == [[-1, 0], [1, 0]]
    # The two faces are 0.4 m apart: each gives way by half of that.
    assert why.shortfall == pytest.approx(0.2)
    assert (why.blame, why.outline_kernel) == ("outline", None)
    assert why.least.depth == 0.2
    assert [feature.kind for feature in why.least.features] == ["pilaster"]
    # From the wall opposite two triangles beside the pilaster are hidden; the search ends at a thousandth of the floor.
    assert 0.2 * 0.2 * 0.2 / 3.8 <= why.hidden.floor_hidden <= 0.001 * 23.92
    assert why.hidden.floor_seen == pytest.approx(why.best.floor)


def test_plinth_and_reveals():
    plinth = reasons(room(PLINTH))
    assert plinth.least.depth == 0.02
    assert "of the pilaster in the north wall" in plinth.because[0]
    windows = [Opening(WallRef(0, edge), "window", 1.0) for edge in (2, 8)]
    why = reasons(room(REVEALS, openings=windows))
    assert why.because == (
        "The east side of the reveal in the south wall and the west side of the reveal in the north wall "
        "face away from each other.",
    )
    assert why.least.depth == 0.25


def test_u_room():
    why = reasons(room(U_ROOM))
    assert why.because == ("The return facing east and the return facing west face away from each other.",)
    assert why.shortfall == pytest.approx(1.5)
    assert why.least is None
    beside = reasons(room(U_ROOM, openings=[Opening(WallRef(0, 2), "window", 1.0, (0.3, 0.6))]))
    assert beside.because[0].startswith("The return facing east beside the window and")


def test_column_alone_is_to_blame():
    why = reasons(room(RECTANGLE, [COLUMN]))
    assert why.blame == "obstacles"
    assert (why.outline_kernel.kind, why.outline_kernel.area) == ("area", 24)
    assert why.because[0].endswith("of the column face away from each other.")
    assert "Without what stands in the room there would be such a point" in why.because[1]
    assert why.shortfall == pytest.approx(0.2)
    assert why.least.depth == 0
    assert why.hidden.floor_fraction > 0.94


def test_column_and_outline_are_both_to_blame():
    why = reasons(room(U_ROOM, [[(1, 1), (1.3, 1), (1.3, 1.3), (1, 1.3)]]))
    assert why.blame == "outline"
    assert why.outline_kernel.kind == "empty"
    assert why.because[1] == "Even without what stands in the room there would be no such point."
    assert any("return facing" in sentence for sentence in why.because)


def test_least_depth_is_told_although_a_column_stands_there():
    why = reasons(room(PILASTER, [COLUMN]))
    assert (why.blame, why.least.depth) == ("outline", 0.2)


def test_three_walls():
    # Three blades of a pinwheel: any two of the inner walls have points in front of them, all three have none.
    ring = [(2, 0.2), (4, 0.2), (-1.17, 1.63), (-2.17, 3.36), (-0.83, -1.83), (-1.83, -3.56)]
    why = reasons(room(ring))
    assert len(why.conflict) == 3
    assert why.because == (
        "No point is in front of the return facing north, the return facing south-west "
        "and the return facing south-east at once.",
    )


def test_a_room_with_a_kernel_has_no_reasons():
    of = room(RECTANGLE)
    with pytest.raises(GeometryError, match="has a kernel"):
        why_no_point(of, kernel_of_rings(of.rings))


def test_names_of_walls():
    assert names(room(RECTANGLE), (0, 0), (0, 1), (0, 2), (0, 3)) == [
        "the south wall",
        "the east wall",
        "the north wall",
        "the west wall",
    ]
    assert names(room(PILASTER), (0, 2)) == ["the face of the pilaster in the south wall"]
    # At depth 0 nothing is small, and the pilaster's side is a wall like any other that faces into the room.
    assert names(room(PILASTER), (0, 1), depth=0) == ["the return facing west"]


def test_names_go_round_with_the_room():
    winds = ["south", "south-east", "east", "north-east", "north", "north-west", "west", "south-west"]
    for eighth, wind in enumerate(winds):
        turned = room(polygons.turned(np.array(RECTANGLE, dtype=float), eighth * pi / 4))
        assert names(turned, (0, 0)) == [f"the {wind} wall"]


def test_names_of_features():
    niche = room([(0, 0), (2, 0), (2, -0.3), (3.2, -0.3), (3.2, 0), (6, 0), (6, 4), (0, 4)])
    assert names(niche, (0, 0), (0, 1), (0, 2), (0, 3)) == [
        "the south wall",
        "the west side of the niche in the south wall",
        "the back of the niche in the south wall",
        "the east side of the niche in the south wall",
    ]
    assert names(room([(0, 0), (6, 0), (6, 4), (0.3, 4), (0, 3.7)]), (0, 3)) == [
        "the chamfer in the north-west corner"
    ]
    jog = room([(0, 0), (3.5, 0), (3.5, 0.02), (6, 0.02), (6, 4), (0, 4)])
    assert names(jog, (0, 2))[0].startswith("the ")
    assert all("jog" in name or "stands out" in name for name in names(jog, (0, 1), (0, 2)))


def test_names_of_openings_and_obstacles():
    door = room(RECTANGLE, openings=[Opening(WallRef(0, 1), "door", 4.0)])
    assert names(door, (0, 1)) == ["the door in the east wall"]
    inner = room(U_ROOM, openings=[Opening(WallRef(0, 3), "window", 3.0)])
    assert names(inner, (0, 3)) == ["the window facing east"]
    columns = room(RECTANGLE, [COLUMN, [(0.2, 1), (2.2, 1), (2.2, 1.2), (0.2, 1.2)]])
    faces = names(columns, *((ring, edge) for ring in (1, 2) for edge in range(4)))
    assert sorted(faces) == sorted(
        f"the {wind} face of the {word} of the room"
        for word in ("column in the middle", "obstacle in the south-west")
        for wind in ("north", "east", "south", "west")
    )


def test_walls_of_one_name_are_told_apart_by_their_place():
    comb = room(polygons.comb(14))
    facing_east = [
        (0, edge) for edge in range(len(comb.outline)) if names(comb, (0, edge)) == ["the return facing east"]
    ]
    found = names(comb, *facing_east)
    assert len(found) > 1
    assert all(" of the room" in name for name in found)


def test_lists_of_names():
    side, other = WallName("the west side", "of the niche"), WallName("the east side", "of the niche")
    wall, end = WallName("the north wall"), WallName("the south wall")
    assert joined([wall, end]) == "the north wall and the south wall"
    assert joined([side, other]) == "the west side and the east side of the niche"
    assert joined([side, other, wall]) == "the west side and the east side of the niche, and the north wall"
    assert joined([side, wall, end]) == "the west side of the niche, the north wall and the south wall"


@pytest.mark.parametrize("points", [PILASTER, PLINTH, U_ROOM, REVEALS])
def test_best_point_is_as_good_as_a_dense_grid(points):
    of = room(points)
    best = best_point(of)
    low, high = of.outline.min(axis=0), of.outline.max(axis=0)
    floors = []
    for x in np.linspace(low[0], high[0], 22)[1:-1]:
        for y in np.linspace(low[1], high[1], 22)[1:-1]:
            try:
                floors.append(view_from(of.rings, (x, y)).floor_fraction)
            except GeometryError:
                continue
    assert best.floor / of.area > 0.99 * max(floors)
    assert best.floor / of.area == pytest.approx(view_from(of.rings, best.point).floor_fraction)


def test_best_point_claims_no_more_than_it_did():
    for points in (PILASTER, U_ROOM):
        best = best_point(room(points))
        assert 0 < best.tried <= TRIED
        assert best.words == f"best of {best.tried} points tried"


def test_best_point_is_the_same_each_time_and_passes_over_points_outside():
    of = room(U_ROOM)
    first, again = best_point(of), best_point(of, [np.array([100.0, 100.0]), np.array([4.5, 5.0])])
    assert (first.point.tolist(), first.floor, first.tried) == (
        again.point.tolist(),
        again.floor,
        again.tried,
    )
    assert best_point(of).point.tolist() == first.point.tolist()


def test_a_likely_point_is_taken_when_it_is_best():
    of = room(RECTANGLE, [COLUMN])
    better = best_point(of)
    assert best_point(of, [better.point]).floor >= better.floor - 1e-9


def hostile(rng):
    makers = [
        polygons.mixed,
        polygons.nearly_degenerate,
        lambda rng: polygons.untangled(rng, 12),
        lambda rng: polygons.untangled(rng, 9, 6),
        lambda rng: polygons.polyomino(rng, int(rng.integers(5, 20))),
        lambda rng: polygons.nearly_degenerate(rng) * 1e-3,
        lambda rng: polygons.mixed(rng) * 1e5,
        lambda rng: polygons.comb(int(rng.integers(8, 60))),
    ]
    for k in range(160):
        try:
            of = room(makers[k % len(makers)](rng))
        except GeometryError:
            continue
        kernel = kernel_of_rings(of.rings)
        if kernel.kind == "empty":
            yield of, kernel


def test_hostile_rooms():
    seen = 0
    for of, kernel in hostile(np.random.default_rng(11)):
        why = why_no_point(of, kernel)
        seen += 1
        assert [tuple(wall.wall) for wall in why.conflict] == [
            tuple(wall) for wall in kernel.conflict.tolist()
        ]
        assert why.shortfall > 0
        assert 0 < why.hidden.floor_fraction <= 1
        assert why.hidden.floor_seen == pytest.approx(why.best.floor, rel=1e-6, abs=1e-6)
        assert why.because[0][0].isupper()
        assert why.because[0].endswith(".")
        if why.least is not None:
            assert kernel_of_rings(why.least.room.rings).kind != "empty"
    assert seen > 60
