"""What is hidden, against answers by hand and against lines of sight tried one by one."""

from math import hypot, nan

import numpy as np
import polygons
import pytest

from kernelscan.coverage.hidden import hidden_from
from kernelscan.errors import GeometryError
from kernelscan.geometry.rings import as_rings
from kernelscan.geometry.shapes import are_simple
from kernelscan.geometry.visible import view_from
from kernelscan.plan import Obstacle, Room, WallRef

PILASTER = [(0, 0), (2.8, 0), (2.8, 0.2), (3.2, 0.2), (3.2, 0), (6, 0), (6, 4), (0, 4)]
RECTANGLE = [(0, 0), (6, 0), (6, 4), (0, 4)]
COLUMN = [(2, 2), (3, 2), (3, 3), (2, 3)]
L_ROOM = [(0, 0), (8, 0), (8, 3), (3, 3), (3, 6), (0, 6)]


def room(points, holes=()):
    outline, *rings = as_rings(points, holes)
    return Room("R001", "room", outline, tuple(map(Obstacle, rings)))


def contains(ring, point):
    """Whether a point is within a ring, by counting crossings."""
    inside = False
    for (px, py), (qx, qy) in zip(ring.tolist(), np.roll(ring, -1, axis=0).tolist(), strict=True):
        if (py > point[1]) != (qy > point[1]):
            inside ^= point[0] < px + (point[1] - py) * (qx - px) / (qy - py)
    return inside


def off_walls(of, point):
    """How far a point is from the nearest wall."""
    nearest = np.inf
    for ring in of.rings:
        for p, q in zip(ring, np.roll(ring, -1, axis=0), strict=True):
            d = q - p
            t = np.clip((point - p) @ d / (d @ d), 0, 1)
            nearest = min(nearest, hypot(*(p + t * d - point)))
    return nearest


def line_of_sight(of, eye, point):
    """Whether two points see each other: +1 clearly, -1 clearly not, 0 where a line just passes a corner."""
    clear = 1
    for ring in of.rings:
        for a, b in zip(ring, np.roll(ring, -1, axis=0), strict=True):
            s = [cross(eye, point, a), cross(eye, point, b), cross(a, b, eye), cross(a, b, point)]
            if min(abs(s[0]), abs(s[1])) < 1e-3:
                clear = 0
            elif s[0] * s[1] < 0 and s[2] * s[3] < 0:
                return -1
    return clear


def cross(a, b, p):
    return (b[0] - a[0]) * (p[1] - a[1]) - (b[1] - a[1]) * (p[0] - a[0])


def test_pilaster_from_the_middle_of_the_wall_opposite():
    hidden = hidden_from(room(PILASTER), (3, 4))
    # By similar triangles the line past the pilaster's edge meets the wall 0.2 * 0.2 / 3.8 m beside it.
    foot = 0.2 * 0.2 / 3.8
    assert [patch.area for patch in hidden.patches] == pytest.approx([0.2 * foot / 2] * 2)
    assert hidden.floor_hidden == pytest.approx(0.2 * foot)
    assert hidden.floor_seen + hidden.floor_hidden == pytest.approx(24 - 0.08)
    assert hidden.wall_hidden == pytest.approx(2 * (0.2 + foot))
    assert hidden.wall_seen + hidden.wall_hidden == pytest.approx(20.4)
    assert [each.wall for each in hidden.stretches[:2]] == [WallRef(0, 1), WallRef(0, 3)]
    assert hidden.stretches[0].ends.tolist() == [[2.8, 0], [2.8, 0.2]]
    assert hidden.stretches[2].length == pytest.approx(foot)


def test_pilaster_from_the_wall_beside_it():
    hidden = hidden_from(room(PILASTER), (1, 0))
    (patch,) = hidden.patches
    height = 0.2 / 1.8 * 5
    # The triangle behind the edge nearer to the eye, without the pilaster's own body.
    assert patch.area == pytest.approx(height * 5 / 2 - 1.8 * 0.2 / 2 - 0.4 * 0.2)
    assert hidden.wall_hidden == pytest.approx(0.4 + 0.2 + 2.8 + height)
    x, y = patch.middle
    assert contains(patch.outline, (x, y))


def test_column_casts_its_shadow():
    hidden = hidden_from(room(RECTANGLE, [COLUMN]), (0, 2))
    # The line along the column's lower face, and the line past its upper left corner, which reaches y = 4 at x = 4.
    assert hidden.floor_hidden == pytest.approx(4 * 2 - 2 * 1 / 2 - 1)
    assert {each.wall for each in hidden.stretches} == {
        WallRef(0, 1),
        WallRef(0, 2),
        WallRef(1, 1),
        WallRef(1, 2),
    }


@pytest.mark.parametrize(
    ("points", "eyes"),
    [
        (RECTANGLE, RECTANGLE),
        (L_ROOM, [(0, 0), (3, 0), (3, 3), (0, 3), (1, 2)]),
        (polygons.smooth_star(80), [(0, 0)]),
    ],
)
def test_from_the_kernel_nothing_is_hidden(points, eyes):
    for eye in eyes:
        hidden = hidden_from(room(points), eye)
        assert hidden.floor_hidden == hidden.wall_hidden == 0
        assert (hidden.patches, hidden.stretches) == ((), ())
        assert hidden.floor_fraction == hidden.wall_fraction == 1


def test_two_eyes_together():
    of = room(PILASTER)
    left, right = hidden_from(of, (1, 0)), hidden_from(of, (5, 0))
    both = hidden_from(of, [(1, 0), (5, 0)])
    assert both.floor_hidden < min(left.floor_hidden, right.floor_hidden)
    # The two lines past the pilaster's edges meet above its middle; below them nobody sees.
    assert both.floor_hidden == pytest.approx(0.4 * (0.2 / 1.8 * 0.2) / 2)
    assert [each.wall for each in both.stretches] == [WallRef(0, 2)]
    assert hidden_from(of, [(1, 0), (5, 4)]).floor_hidden == 0
    again = hidden_from(of, [(5, 0), (1, 0)])
    assert (again.floor_hidden, again.wall_hidden) == pytest.approx((both.floor_hidden, both.wall_hidden))


def test_the_same_eye_twice_is_one():
    once, twice = (hidden_from(room(PILASTER), eyes) for eyes in ((1, 0), [(1, 0), (1, 0)]))
    assert (once.floor_hidden, once.wall_hidden) == pytest.approx((twice.floor_hidden, twice.wall_hidden))


@pytest.mark.parametrize("eye", [(-1, 0), (2.5, 2.5), (nan, 0)])
def test_eyes_that_are_not_in_the_room(eye):
    with pytest.raises(GeometryError):
        hidden_from(room(RECTANGLE, [COLUMN]), eye)


def test_a_column_that_touches_the_wall_where_the_eye_is():
    diamond = [(0, 2), (0.5, 1.5), (1, 2), (0.5, 2.5)]
    hidden = hidden_from(room(RECTANGLE, [diamond]), (0, 2))
    # The two lines along the column's faces rise and fall by 45 degrees and meet the long walls at x = 2.
    assert hidden.floor_hidden == pytest.approx(24 - 0.5 - 2 * 2 * 2 / 2)
    assert len(hidden.patches) == 1


def test_far_from_the_origin():
    here = hidden_from(room(PILASTER), (1, 1))
    there = hidden_from(room(np.array(PILASTER) + 5e6), (5e6 + 1, 5e6 + 1))
    assert there.floor_hidden == pytest.approx(here.floor_hidden, abs=1e-6)
    assert there.wall_hidden == pytest.approx(here.wall_hidden, abs=1e-6)
    assert len(there.patches) == len(here.patches)


def test_a_region_that_rounding_makes_cross_itself():
    # Four blades of a pinwheel far from the origin; the eye is on a wall in line with the tip of another.
    of = room([
        (-3141913.290284154, -3367835.5436676578),
        (-3141913.4804830467, -3367833.5527321035),
        (-3141910.0320815123, -3367833.223297958),
        (-3141910.994253875, -3367832.7839392624),
        (-3141911.8513817256, -3367832.3925472535),
        (-3141910.4124792977, -3367829.2414268493),
        (-3141912.0415806184, -3367830.4016116993),
        (-3141913.5875332914, -3367828.230825258),
        (-3141914.051079725, -3367827.5799254407),
        (-3141913.860880832, -3367829.570860995),
        (-3141917.3092823667, -3367829.9002951407),
        (-3141915.4899821533, -3367830.731045845),
        (-3141916.928884581, -3367833.882166249),
        (-3141915.2997832606, -3367832.721981399),
    ])  # fmt: skip
    eye = of.outline[3]
    assert not are_simple([view_from(of.rings, eye).region]).any()
    hidden = hidden_from(of, eye)
    assert hidden.floor_fraction == pytest.approx(view_from(of.rings, eye).floor_fraction, abs=1e-6)


def random_rooms(count):
    rng = np.random.default_rng(8)
    makers = [polygons.mixed, lambda rng: polygons.untangled(rng, 12), lambda rng: polygons.polyomino(rng, 9)]
    for k in range(count):
        of = room(makers[k % len(makers)](rng))
        low, high = of.outline.min(axis=0), of.outline.max(axis=0)
        points = [point for point in rng.uniform(low, high, (60, 2)) if contains(of.outline, point)]
        if len(points) > 3:
            yield of, points


def test_random_rooms_agree_with_single_views():
    for of, points in random_rooms(80):
        for eye in [*points[:2], of.outline[0]]:
            hidden, view = hidden_from(of, eye), view_from(of.rings, eye)
            assert hidden.floor_fraction == pytest.approx(view.floor_fraction, abs=1e-6)
            assert hidden.wall_fraction == pytest.approx(view.wall_fraction, abs=1e-6)


def test_random_points_are_hidden_when_no_line_of_sight_reaches_them():
    tried = 0
    for of, (eye, other, *points) in random_rooms(60):
        hidden = hidden_from(of, [eye, other])
        for point in points:
            sights = [line_of_sight(of, each, point) for each in (eye, other)]
            if off_walls(of, point) < 1e-3 or (max(sights) < 1 and 0 in sights):
                continue
            tried += 1
            assert any(contains(patch.outline, point) for patch in hidden.patches) == (max(sights) == -1)
    assert tried > 500
