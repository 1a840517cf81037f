"""Small features against answers by hand, and against distances measured without the package's code."""

from math import cos, hypot, inf, nan, pi, sin, sqrt

import numpy as np
import polygons
import pytest

from kernelscan.coverage.features import least_depth, least_simplified, simplified
from kernelscan.errors import GeometryError
from kernelscan.geometry.kernel import kernel_of_rings
from kernelscan.geometry.rings import as_rings
from kernelscan.plan import Obstacle, Opening, Room, WallRef

PILASTER = [(0, 0), (2.8, 0), (2.8, 0.2), (3.2, 0.2), (3.2, 0), (6, 0), (6, 4), (0, 4)]
NICHE = [(0, 0), (2, 0), (2, -0.3), (3.2, -0.3), (3.2, 0), (6, 0), (6, 4), (0, 4)]
SPLAYED = [(0, 0), (2, 0), (2.4, -0.4), (3.6, -0.4), (4, 0), (6, 0), (6, 4), (0, 4)]
CHAMFERED = [(0, 0), (6, 0), (6, 4), (0.3, 4), (0, 3.7)]
BOXED = [(0, 0), (6, 0), (6, 4), (0.3, 4), (0.3, 3.8), (0, 3.8)]
JOG = [(0, 0), (3.5, 0), (3.5, 0.02), (6, 0.02), (6, 4), (0, 4)]
PLINTH = [(0, 0), (6, 0), (6, 4), (4, 4), (4, 3.98), (2, 3.98), (2, 4), (0, 4)]
U_ROOM = [(0, 0), (9, 0), (9, 6), (6, 6), (6, 3), (3, 3), (3, 6), (0, 6)]
L_ROOM = [(0, 0), (8, 0), (8, 3), (3, 3), (3, 6), (0, 6)]
SAMPLES = {
    "pilaster": PILASTER,
    "niche": NICHE,
    "splayed": SPLAYED,
    "chamfered": CHAMFERED,
    "boxed": BOXED,
    "jog": JOG,
    "plinth": PLINTH,
}


def room(points, holes=(), openings=()):
    outline, *rings = as_rings(points, holes)
    return Room("R001", "room", outline, tuple(map(Obstacle, rings)), tuple(openings))


def cycle(outline):
    """The points from the leftmost and lowest on, without those on straight walls."""
    ring = np.asarray(outline, dtype=float)
    ahead = np.roll(ring, -1, axis=0) - ring
    back = np.roll(ahead, 1, axis=0)
    ring = ring[np.abs(back[:, 0] * ahead[:, 1] - back[:, 1] * ahead[:, 0]) > 1e-7]
    first = min(range(len(ring)), key=lambda k: tuple(np.round(ring[k], 4)))
    return np.roll(ring, -first, axis=0)


def sampled(ring, pitch=0.01):
    """Points all along a ring."""
    pieces = []
    for p, q in zip(ring, np.roll(ring, -1, axis=0), strict=True):
        count = int(hypot(*(q - p)) / pitch) + 2
        pieces.append(p + np.linspace(0, 1, count)[:, None] * (q - p))
    return np.concatenate(pieces)


def farthest(points, ring):
    """How far the farthest of some points is from a ring."""
    p, d = ring, np.roll(ring, -1, axis=0) - ring
    off = points[:, None] - p
    t = np.clip((off * d).sum(axis=2) / (d * d).sum(axis=1), 0, 1)
    return float(np.hypot(*np.moveaxis(off - t[..., None] * d, 2, 0)).min(axis=1).max())


def strays(one, other):
    """The distance of Hausdorff between two rings, from below and to the pitch of the samples."""
    origin = one[0].copy()
    one, other = one - origin, other - origin
    return max(farthest(sampled(one), other), farthest(sampled(other), one))


def spoilt_rectangle(rng):
    """A rectangle with pilasters and niches of all sizes, square and splayed."""
    width, height = np.round(rng.uniform(3, 9, 2), 2)
    corners = np.array([(0, 0), (width, 0), (width, height), (0, height)], dtype=float)
    ring = []
    for p, q in zip(corners, np.roll(corners, -1, axis=0), strict=True):
        length = hypot(*(q - p))
        way = (q - p) / length
        left, at = np.array([-way[1], way[0]]), 0.3
        ring.append(p)
        for _ in range(rng.integers(0, 4)):
            start = at + rng.uniform(0.05, 0.5)
            at = start + rng.uniform(0.15, 0.8)
            depth, splay = round(rng.uniform(-0.6, 0.6), 2) or 0.1, rng.choice([0, 0.05])
            if at > length - 0.8:
                break
            places = [(start, 0), (start + splay, depth), (at - splay, depth), (at, 0)]
            ring += [p + x * way + y * left for x, y in places]
    return np.array(ring)


def families(count):
    """Random rooms, some turned and some far from the origin; those that are no rooms are left out."""
    rng = np.random.default_rng(20)
    makers = [
        spoilt_rectangle,
        spoilt_rectangle,
        polygons.mixed,
        polygons.nearly_degenerate,
        lambda rng: polygons.untangled(rng, 12),
        lambda rng: polygons.polyomino(rng, int(rng.integers(3, 25))) * 0.3,
    ]
    for k in range(count):
        points = makers[k % len(makers)](rng)
        points = polygons.turned(points, rng.uniform(0, 2 * pi)) if k % 5 == 0 else points
        points = points + 5e6 if k % 7 == 0 else points
        try:
            yield room(points)
        except GeometryError:
            continue


def test_pilaster():
    exact = room(PILASTER)
    assert simplified(exact, 0.199).room is exact
    plain = simplified(exact, 0.2)
    (feature,) = plain.features
    assert (feature.kind, feature.depth, feature.projects) == ("pilaster", 0.2, True)
    assert feature.width == pytest.approx(0.4)
    assert feature.middle.tolist() == [3.0, 0.2]
    assert feature.walls == tuple(WallRef(0, edge) for edge in (1, 2, 3))
    assert feature.chain.tolist() == feature.ring.tolist() == [[2.8, 0], [2.8, 0.2], [3.2, 0.2], [3.2, 0]]
    assert plain.room.outline.tolist() == [[0, 0], [2.8, 0], [3.2, 0], [6, 0], [6, 4], [0, 4]]
    assert plain.walls == (WallRef(0, 0), None, *(WallRef(0, edge) for edge in (4, 5, 6, 7)))
    assert kernel_of_rings(exact.rings).kind == "empty"
    assert kernel_of_rings(plain.room.rings).area == 24


def test_no_device_is_offered_where_a_feature_was():
    plain = simplified(room(PILASTER), 0.2)
    assert plain.room.openings == (Opening(WallRef(0, 1), "feature", pytest.approx(0.4)),)


def test_square_and_splayed_niche():
    # Of published rooms: the kernel of the first is 2 <= x <= 3.2, of area 4.8, that of the second has the area 20.
    for points, kind, depth, area in ((NICHE, "niche", 0.3, 4.8), (SPLAYED, "splayed niche", 0.4, 20)):
        exact = room(points)
        assert kernel_of_rings(exact.rings).area == pytest.approx(area, abs=1e-9)
        plain = simplified(exact, depth)
        assert [(each.kind, each.depth, each.projects) for each in plain.features] == [(kind, depth, False)]
        assert kernel_of_rings(plain.room.rings).area == 24
        assert least_depth(exact) == 0


def test_window_reveal():
    window = Opening(WallRef(0, 2), "window", 1.2)
    plain = simplified(room(NICHE, openings=[window]), 0.3)
    assert [each.kind for each in plain.features] == ["reveal"]
    assert plain.room.openings == (Opening(WallRef(0, 1), "window", pytest.approx(1.2)),)


def test_skirting_jog_leaves_the_longer_wall():
    plain = simplified(room(JOG), 0.02)
    (feature,) = plain.features
    assert (feature.kind, feature.depth, feature.projects) == ("jog", 0.02, True)
    assert feature.width == pytest.approx(2.5)
    assert cycle(plain.room.outline).tolist() == [[0, 0], [6, 0], [6, 4], [0, 4]]
    assert simplified(room(JOG), 0.0199).features == ()


def test_jog_in_the_middle_leaves_the_smaller_room():
    plain = simplified(room([(0, 0), (3, 0), (3, 0.02), (6, 0.02), (6, 4), (0, 4)]), 0.02)
    assert cycle(plain.room.outline).tolist() == [[0, 0.02], [6, 0.02], [6, 4], [0, 4]]
    assert not plain.features[0].projects


def test_plinth_is_one_pilaster_and_not_two_jogs():
    assert [(each.kind, each.depth) for each in simplified(room(PLINTH), 0.5).features] == [
        ("pilaster", 0.02)
    ]


def test_chamfer_is_as_deep_as_the_corner_lies_off_the_cut():
    plain = simplified(room(CHAMFERED), 0.213)
    (feature,) = plain.features
    assert feature.kind == "chamfer"
    assert feature.depth == pytest.approx(0.3 / sqrt(2), abs=1e-6)
    assert feature.width == pytest.approx(0.3 * sqrt(2))
    assert feature.ring.tolist() == [[0.3, 4], [0, 3.7], [0, 4]]
    assert cycle(plain.room.outline).tolist() == [[0, 0], [6, 0], [6, 4], [0, 4]]
    assert simplified(room(CHAMFERED), 0.212).features == ()


def test_boxed_in_corner():
    (feature,) = simplified(room(BOXED), 0.2).features
    assert (feature.kind, feature.depth, feature.projects) == ("jog", 0.2, True)
    assert feature.width == pytest.approx(0.3)


def test_rounded_corner():
    arc = [(0.4 - 0.4 * sin(t), 3.6 + 0.4 * cos(t)) for t in np.linspace(0, pi / 2, 9)]
    plain = simplified(room([(0, 0), (6, 0), (6, 4), *arc]), 0.2)
    assert [each.kind for each in plain.features] == ["rounded corner"]
    # The corner is off the arc by r (sqrt 2 - 1); the middle of the arc is one of its points.
    assert plain.features[0].depth == pytest.approx(0.4 * (sqrt(2) - 1), abs=1e-6)
    assert cycle(plain.room.outline) == pytest.approx(np.array([(0, 0), (6, 0), (6, 4), (0, 4)]))


@pytest.mark.parametrize("sides", [3, 4, 5, 6, 8, 12, 40, 100, 301])
def test_regular_polygons_and_round_rooms_have_no_features(sides):
    assert simplified(room(polygons.convex(sides) * 0.3), 1.0).features == ()


@pytest.mark.parametrize("points", [L_ROOM, U_ROOM])
def test_real_geometry_stays(points):
    assert simplified(room(points), 1.0).features == ()


def test_alcove_deeper_than_asked_stays():
    alcove = room([(0, 0), (2, 0), (2, -0.6), (3, -0.6), (3, 0), (6, 0), (6, 4), (0, 4)])
    assert simplified(alcove, 0.59).features == ()
    assert [each.kind for each in simplified(alcove, 0.6).features] == ["niche"]


def test_free_column_is_no_feature():
    column = [(4, 2), (4.1, 2), (4.1, 2.1), (4, 2.1)]
    plain = simplified(room(PILASTER, [column]), 1.0)
    assert len(plain.room.obstacles) == 1
    assert [each.kind for each in plain.features] == ["pilaster"]
    assert least_depth(room(PILASTER, [column])) is None


def test_niche_with_a_column_in_it_stays():
    column = [(2.5, -0.2), (2.6, -0.2), (2.6, -0.1), (2.5, -0.1)]
    assert simplified(room(NICHE, [column]), 0.5).features == ()


def test_depth_none_is_the_room_itself():
    for points in SAMPLES.values():
        exact = room(points)
        plain = simplified(exact, 0)
        assert plain.room is exact
        assert plain.features == ()
        assert plain.walls == tuple(WallRef(0, edge) for edge in range(len(points)))


@pytest.mark.parametrize("depth", [-0.1, nan, inf])
def test_depths_that_are_none(depth):
    with pytest.raises(GeometryError, match="0 or more"):
        simplified(room(PILASTER), depth)


def test_staircase_of_jogs_does_not_creep():
    steps = [point for k in range(12) for point in ((0.5 * k, 0.05 * k), (0.5 * k + 0.5, 0.05 * k))]
    exact = room([*steps, (6, 5), (0, 5)])
    for depth in (0.05, 0.1, 0.2, 0.3):
        plain = simplified(exact, depth)
        assert plain.features
        assert strays(exact.outline, plain.room.outline) <= depth + 2e-6
        levels = {
            round(y, 6) for (_, y), wall in zip(plain.room.outline.tolist(), plain.walls, strict=True) if wall
        }
        assert levels <= {round(0.05 * k, 6) for k in range(12)} | {5.0}


def test_openings_move_with_their_walls():
    openings = [
        Opening(WallRef(0, 0), "door", 0.7, (0.5, 0.75)),
        Opening(WallRef(0, 5), "window", 2.0, (0.25, 0.75)),
        Opening(WallRef(0, 2), "gap", 0.1, (0.0, 0.25)),
    ]
    plain = simplified(room(PILASTER, openings=openings), 0.2)
    assert plain.room.openings == (
        Opening(WallRef(0, 0), "door", pytest.approx(0.7), (0.5, 0.75)),
        Opening(WallRef(0, 1), "gap", pytest.approx(0.4), (0.0, 1.0)),
        Opening(WallRef(0, 3), "window", pytest.approx(2.0), (0.25, 0.75)),
    )


def test_an_opening_at_a_wall_cut_back_is_cut_with_it():
    # The left wall loses its lowest 20 mm, and with it the end of the door that reaches down to the floor's corner.
    points = [(0, 0), (2, 0), (2, 0.02), (6, 0.02), (6, 4), (0, 4)]
    plain = simplified(room(points, openings=[Opening(WallRef(0, 5), "door", 1.0, (0.75, 1.0))]), 0.02)
    (door,) = (each for each in plain.room.openings if each.kind == "door")
    ends = plain.room.opening_ends(door)
    assert ends == pytest.approx(np.array([(0, 1), (0, 0.02)]))
    assert door.width == pytest.approx(0.98)


MOVES = {
    "mirrored": polygons.mirrored,
    "turned by a quarter": lambda points: points @ np.array([[0, 1], [-1, 0]]),
    "turned": lambda points: polygons.turned(points, 0.7),
    "far away": lambda points: points + 5e6,
    "from another vertex": lambda points: np.roll(points, 3, axis=0),
    "with split walls": lambda points: np.insert(points, 1, (points[0] + points[1]) / 2, axis=0),
}


@pytest.mark.parametrize("move", MOVES.values(), ids=MOVES.keys())
@pytest.mark.parametrize("points", SAMPLES.values(), ids=SAMPLES.keys())
def test_same_answer_wherever_the_room_lies(points, move):
    points = np.array(points, dtype=float)
    here, there = simplified(room(points), 0.45), simplified(room(move(points)), 0.45)
    for before, after in zip(
        *(sorted(each.features, key=lambda f: f.depth) for each in (here, there)), strict=True
    ):
        assert (after.kind, after.projects) == (before.kind, before.projects)
        assert (after.depth, after.width) == pytest.approx((before.depth, before.width), abs=2e-6)
    expected = room(move(here.room.outline)).outline
    assert cycle(there.room.outline) == pytest.approx(cycle(expected), abs=1e-6)


def test_random_rooms_stray_by_no_more_than_asked():
    rng, seen = np.random.default_rng(4), 0
    for exact in families(240):
        depth = float(rng.choice([0.02, 0.1, 0.3, 0.6, 1.0]))
        plain = simplified(exact, depth)
        seen += len(plain.features)
        assert strays(exact.outline, plain.room.outline) <= depth + 2e-6
        as_rings(plain.room.outline, plain.room.holes)
        assert all(each.depth <= depth for each in plain.features)
    assert seen > 200


def test_random_rooms_keep_their_walls_on_their_lines():
    kept = 0
    for exact in families(150):
        plain = simplified(exact, 0.4)
        ends = np.roll(plain.room.outline, -1, axis=0)
        assert len(plain.walls) == len(ends)
        for start, end, wall in zip(plain.room.outline, ends, plain.walls, strict=True):
            if wall is None:
                continue
            p, q = exact.wall_ends(wall)
            length = hypot(*(q - p))
            (x, y), (along, off) = (q - p) / length, ([], [])
            for dx, dy in (start - p, end - p):
                along.append(x * dx + y * dy)
                off.append(abs(x * dy - y * dx))
            assert max(off) < 1e-8
            assert -1e-8 <= along[0] < along[1] <= length + 1e-8
            kept += 1
    assert kept > 1000


def test_least_depth_by_hand():
    assert least_depth(room(PILASTER)) == 0.2
    assert least_depth(room(PLINTH)) == 0.02
    assert least_depth(room(L_ROOM)) == 0
    assert least_depth(room(U_ROOM)) is None
    assert least_depth(room(PILASTER), most=0.1) is None
    two = [
        (0, 0),
        (1, 0),
        (1, 0.1),
        (1.4, 0.1),
        (1.4, 0),
        (4, 0),
        (4, 0.3),
        (4.4, 0.3),
        (4.4, 0),
        (6, 0),
        (6, 4),
        (0, 4),
    ]
    assert least_depth(room(two)) == 0.3


def test_least_depth_is_the_least():
    rng, found = np.random.default_rng(6), 0
    for exact in families(120):
        least = least_simplified(exact)
        if least is None or least.depth == 0:
            continue
        found += 1
        assert kernel_of_rings(least.room.rings).kind != "empty"
        again = simplified(exact, least.depth)
        assert again.room.outline.tolist() == least.room.outline.tolist()
        for depth in (*rng.uniform(0, least.depth, 3), least.depth - 1e-6):
            assert kernel_of_rings(simplified(exact, depth).room.rings).kind == "empty"
    assert found > 12


def test_hostile_rooms():
    thin = [(0, 0), (10, 0), (10, 1e-7), (0, 1e-7)]
    spike = [(0, 0), (6, 0), (6, 4), (3, 4), (3 - 1e-9, 1e-3), (3 - 2e-9, 4), (0, 4)]
    tiny = np.array(PILASTER) * 1e-9
    for points in (thin, spike, tiny, [(0, 0), (1, 0), (0, 1)]):
        for depth in (1e-9, 0.1, 1e6):
            plain = simplified(room(points), depth)
            assert len(plain.walls) == len(plain.room.outline)
