"""Mount zones against a test of its own: a point sees every wall when it is on the inner side of every edge."""

from fractions import Fraction
from math import atan2, cos, degrees, hypot, pi, radians, sin

import numpy as np
import pytest

from kernelscan.coverage import room_zones
from kernelscan.geometry.rings import as_ring
from kernelscan.plan import Opening, Room, WallRef

L_ROOM = [(0, 0), (8, 0), (8, 3), (3, 3), (3, 6), (0, 6)]
U_ROOM = [(0, 0), (9, 0), (9, 6), (6, 6), (6, 3), (3, 3), (3, 6), (0, 6)]
RECTANGLE = [(0, 0), (6, 0), (6, 4), (0, 4)]


def room(points, openings=()):
    return Room("R001", "room", as_ring(points), openings=tuple(openings))


def sees_all(of, point, slack=0):
    """Whether a rational point is on the inner side of every edge, or short of it by no more than the slack."""
    x, y = (Fraction(float(value)) for value in point)
    for ring in of.rings:
        for a, b in zip(ring.tolist(), np.roll(ring, -1, axis=0).tolist(), strict=True):
            ax, ay, bx, by = map(Fraction, (*a, *b))
            if (bx - ax) * (y - ay) - (by - ay) * (x - ax) < -slack * Fraction(hypot(bx - ax, by - ay)):
                return False
    return True


def star(rng, count, spread):
    """A star-shaped room around the origin, so that its kernel is not empty."""
    angles = np.sort(rng.uniform(0, 2 * pi, count)) + np.arange(count) * 1e-3
    radii = rng.uniform(1, spread, count) * 3
    return np.column_stack([radii * np.cos(angles), radii * np.sin(angles)])


def turn_at(ring, k):
    """The change of heading at a vertex, within half a turn."""
    (ax, ay), (bx, by), (cx, cy) = ring[k - 1], ring[k], ring[(k + 1) % len(ring)]
    heading = atan2(cy - by, cx - bx) - atan2(by - ay, bx - ax)
    return (heading + pi) % (2 * pi) - pi


def best(zones):
    return {spot.mount: spot for spot in zones.recommended}


def test_l_room_by_hand():
    zones = room_zones(room(L_ROOM))
    assert zones.kernel.kind == "area"
    assert [(zone.walls, zone.path.tolist()) for zone in zones.walls] == [
        ((WallRef(0, 0),), [[0, 0], [3, 0]]),
        ((WallRef(0, 5),), [[0, 3], [0, 0]]),
    ]
    corners = {tuple(zone.spot.point.tolist()): zone.spot for zone in zones.corners}
    assert set(corners) == {(0, 0), (3, 3)}
    assert degrees(corners[0, 0].field_of_view) == pytest.approx(90)
    assert degrees(corners[0, 0].bearing) == pytest.approx(45)
    assert corners[0, 0].farthest == pytest.approx(hypot(8, 3))
    assert corners[0, 0].tolerance == pytest.approx(3)
    assert degrees(corners[3, 3].field_of_view) == pytest.approx(270)
    spots = best(zones)
    assert list(spots) == ["ceiling", "wall", "corner"]
    assert spots["ceiling"].point == pytest.approx([1.5, 1.5])
    assert spots["ceiling"].tolerance == pytest.approx(1.5)
    assert spots["corner"].point.tolist() == [0, 0]


def test_rectangle_by_hand():
    zones = room_zones(room(RECTANGLE))
    assert [zone.length for zone in zones.walls] == [6, 4, 6, 4]
    assert len(zones.corners) == 4
    wall = best(zones)["wall"]
    assert wall.point == pytest.approx([3, 0], abs=1e-6)
    assert degrees(wall.field_of_view) == 180
    assert degrees(wall.bearing) == pytest.approx(90)
    assert wall.tolerance == pytest.approx(3)


def test_an_empty_kernel_has_no_zones():
    zones = room_zones(room(U_ROOM))
    assert zones.kernel.kind == "empty"
    assert (zones.ceiling, zones.walls, zones.corners, zones.recommended) == (None, (), (), ())


def test_a_kernel_of_one_point_or_a_segment_leaves_the_ceiling():
    point = room_zones(room([(2, 0), (4, 0), (-1, 2), (-2, 4), (-1, -2), (-2, -4)]))
    assert point.kernel.kind == "point"
    assert [(spot.mount, spot.point.tolist(), spot.tolerance) for spot in point.recommended] == [
        ("ceiling", [0, 0], 0)
    ]
    segment = room_zones(room([(0, 0), (4, 0), (4, 2), (8, 2), (8, 6), (4, 6), (4, 4), (0, 4)]))
    assert segment.kernel.kind == "segment"
    assert best(segment)["ceiling"].point.tolist() == [4, 3]
    assert segment.walls == ()


def test_nothing_is_fixed_to_an_opening():
    door = Opening(WallRef(0, 1), "door", 4.0)
    zones = room_zones(room(RECTANGLE, [door]))
    assert [zone.walls for zone in zones.walls] == [(WallRef(0, k),) for k in (0, 2, 3)]
    assert {tuple(zone.spot.point.tolist()) for zone in zones.corners} == {(0, 4), (0, 0)}


def test_a_door_in_a_wall_parts_the_stretch():
    ring = [(0, 0), (2, 0), (3, 0), (6, 0), (6, 4), (0, 4)]
    whole = room_zones(room(ring))
    assert whole.walls[0].walls == tuple(WallRef(0, k) for k in (0, 1, 2))
    assert len(whole.corners) == 4
    parted = room_zones(room(ring, [Opening(WallRef(0, 1), "door", 1.0)]))
    assert [zone.length for zone in parted.walls] == [2, 3, 4, 6, 4]
    assert len(parted.corners) == 4


def test_a_round_room_is_one_stretch_without_corners():
    turns = np.arange(120) * 2 * pi / 120
    zones = room_zones(room(np.column_stack([3 * np.cos(turns), 3 * np.sin(turns)])))
    assert len(zones.walls) == 1
    assert zones.walls[0].length == pytest.approx(120 * 6 * sin(pi / 120))
    assert zones.corners == ()
    spots = best(zones)
    assert spots["ceiling"].point == pytest.approx([0, 0], abs=1e-9)
    assert spots["ceiling"].tolerance == pytest.approx(3 * cos(pi / 120))
    assert spots["wall"].tolerance == pytest.approx(3 * cos(pi / 120))


@pytest.mark.parametrize("seed", range(60))
def test_zones_of_random_rooms(seed):
    """Points of every zone see every wall; points of the outline outside the zones do not."""
    rng = np.random.default_rng(seed)
    of = room(star(rng, int(rng.integers(4, 14)), rng.uniform(1, 2.5)))
    zones = room_zones(of)
    assert zones.kernel.kind == "area"
    for zone in zones.walls:
        inner = zone.path[:-1] + rng.random((len(zone.path) - 1, 1)) * np.diff(zone.path, axis=0)
        assert all(sees_all(of, point, Fraction(1, 10**9)) for point in inner)
    sharp = {k for k in range(len(of.outline)) if abs(turn_at(of.outline, k)) >= radians(20)}
    expected = {k for k, corner in enumerate(of.outline) if sees_all(of, corner)}
    assert {zone.spot.walls[1].edge for zone in zones.corners} == expected & sharp
    assert {wall.edge for zone in zones.walls for wall in zone.walls[1:]} <= expected - sharp
    covered = {wall.edge: zone.path[k : k + 2] for zone in zones.walls for k, wall in enumerate(zone.walls)}
    for edge in range(len(of.outline)):
        start, end = of.wall_ends(WallRef(0, edge))
        for t in np.linspace(0.001, 0.999, 41):
            point = start + t * (end - start)
            if edge in covered:
                low, high = sorted(
                    ((ends - start) @ (end - start)) / ((end - start) @ (end - start))
                    for ends in covered[edge]
                )
                if low - 1e-9 <= t <= high + 1e-9:
                    continue
            assert not sees_all(of, point, -Fraction(1, 10**12))


@pytest.mark.parametrize("seed", range(40))
def test_the_tolerance_is_true_and_cannot_be_larger(seed):
    """Off by a little less than the tolerance every wall is still seen; off by more, somewhere not."""
    rng = np.random.default_rng(1000 + seed)
    of = room(star(rng, int(rng.integers(5, 12)), rng.uniform(1, 2)))
    zones = room_zones(of)
    ways = np.array([[cos(turn), sin(turn)] for turn in np.linspace(0, 2 * pi, 720, endpoint=False)])
    for spot in zones.recommended:
        stretch = [wall for zone in zones.walls if set(spot.walls) & set(zone.walls) for wall in zone.walls]
        fixed_to = [of.wall_ends(wall) for wall in (stretch if spot.mount == "wall" else spot.walls)]

        def off_by(distance, spot=spot, fixed_to=fixed_to):
            for x, y in spot.point + distance * ways:
                if all((b[0] - a[0]) * (y - a[1]) >= (b[1] - a[1]) * (x - a[0]) for a, b in fixed_to):
                    yield x, y

        assert all(sees_all(of, point, Fraction(1, 10**9)) for point in off_by(spot.tolerance * 0.999))
        if spot.mount == "ceiling":
            assert not all(sees_all(of, point) for point in off_by(spot.tolerance * 1.01 + 1e-6))


@pytest.mark.parametrize("seed", range(20))
def test_no_recommended_spot_is_beaten_by_trial(seed):
    """The deepest point and the best of each stretch are at least as good as any tried at random."""
    rng = np.random.default_rng(2000 + seed)
    of = room(star(rng, 9, 1.8))
    zones = room_zones(of)
    lines = np.array([of.wall_ends(WallRef(*wall)) for wall in zones.kernel.walls.tolist()])
    ways = lines[:, 1] - lines[:, 0]
    normals = np.column_stack([-ways[:, 1], ways[:, 0]]) / np.hypot(*ways.T)[:, None]
    low, high = zones.kernel.vertices.min(axis=0), zones.kernel.vertices.max(axis=0)
    tried = rng.uniform(low, high, (4000, 2))
    depths = (normals * (tried[:, None] - lines[:, 0])).sum(axis=2).min(axis=1)
    assert depths.max() <= best(zones)["ceiling"].tolerance + 1e-9


def test_turned_and_moved_rooms_have_turned_and_moved_zones():
    plain = room_zones(room(L_ROOM))
    turn = np.array([[cos(radians(30)), sin(radians(30))], [-sin(radians(30)), cos(radians(30))]])
    moved = room_zones(room(np.array(L_ROOM) @ turn + [100, -50]))
    for before, after in zip(plain.recommended, moved.recommended, strict=True):
        assert before.mount == after.mount
        assert after.tolerance == pytest.approx(before.tolerance)
        assert after.farthest == pytest.approx(before.farthest)
        assert after.field_of_view == pytest.approx(before.field_of_view)
