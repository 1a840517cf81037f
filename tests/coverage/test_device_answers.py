"""Devices in rooms: by hand, against tests of their own, and walked back from the walls."""

from dataclasses import replace
from math import cos, degrees, hypot, inf, pi, radians, sin, sqrt

import device_trials
import numpy as np
import pytest
import shapely

from kernelscan.coverage.aim import best_aim, seen_from
from kernelscan.coverage.device_answers import device_answer
from kernelscan.coverage.limits import device_limits
from kernelscan.coverage.setting_out import point_from, setting_out
from kernelscan.geometry.kernel import kernel_of_rings
from kernelscan.geometry.rings import as_ring
from kernelscan.geometry.visible import visible_from
from kernelscan.plan import Clearances, Device, Opening, Room, WallRef

L_ROOM = [(0, 0), (8, 0), (8, 3), (3, 3), (3, 6), (0, 6)]
U_ROOM = [(0, 0), (9, 0), (9, 6), (6, 6), (6, 3), (3, 3), (3, 6), (0, 6)]
RECTANGLE = [(0, 0), (6, 0), (6, 4), (0, 4)]

CORNER_CAMERA = Device("corner", "camera", ("corner",), radians(95))
WALL_SENSOR = Device("wall", "motion", ("wall",), pi)
DOME = Device("dome", "camera", ("ceiling",), 2 * pi)


def room(points, openings=()):
    return Room("R001", "room", as_ring(points), openings=tuple(openings))


def answer(of, device, **options):
    return device_answer(of, kernel_of_rings(of.rings), device, **options)


def only_spot(of, device, **options):
    (spot,) = answer(of, device, **options).spots
    return spot


@pytest.mark.parametrize("seed", range(60))
def test_zones_against_distances_angles_and_rays(seed):
    """The same trials as ``device_trials.py`` runs by the thousand."""
    device_trials.try_room(np.random.default_rng([8, seed]), device_trials.Tally())


def run_trials(count):
    for seed in range(count):
        device_trials.try_room(np.random.default_rng([8, seed]), device_trials.Tally())


def test_the_trials_can_fail(monkeypatch):
    monkeypatch.setattr(device_trials, "slack", lambda *_: 1.0)
    with pytest.raises(AssertionError):
        run_trials(60)


def test_a_corner_camera_in_an_l():
    spot = only_spot(room(L_ROOM), CORNER_CAMERA)
    assert spot.point.tolist() == [0, 0]
    assert degrees(spot.bearing) == pytest.approx(45)
    assert degrees(spot.bearing_slack) == pytest.approx(2.5)
    assert spot.farthest == pytest.approx(hypot(8, 3))
    assert spot.tolerance == pytest.approx(3)


def test_a_corner_camera_that_is_too_narrow_says_what_it_sees():
    found = answer(room(RECTANGLE), replace(CORNER_CAMERA, horizontal_field=radians(60)))
    assert not found.covers
    assert found.obstruction == "field"
    assert len(found.partial) == 4
    best = found.partial[0]
    # By hand, from the corner of a 6 x 4 room: 60 degrees turned to leave out the angle next to the long wall or next
    # to the short one, or some of both; what is left out is least when both ends of the field reach equally far.
    area = max(
        24 - 0.5 * 6 * 6 * np.tan(low) - 0.5 * 4 * 4 * np.tan(radians(30) - low)
        for low in np.linspace(0, radians(30), 601)
    )
    assert best.aim.floor == pytest.approx(area / 24, abs=2e-4)


def test_a_wall_sensor_stands_off_and_stays_from_the_corners():
    device = replace(WALL_SENSOR, stand_off=0.1, clearances=Clearances(walls=1.0))
    found = answer(room(RECTANGLE), device)
    bottom = next(place for place in found.stretches if place.walls == (WallRef(0, 0),))
    assert bottom.ends == pytest.approx(np.array([[1, 0], [5, 0]]))
    spot = found.spots[0]
    assert spot.lens == pytest.approx(spot.point + 0.1 * np.array([cos(spot.bearing), sin(spot.bearing)]))


def test_the_reach_cuts_a_stretch():
    found = answer(room(RECTANGLE), replace(WALL_SENSOR, farthest=5.2))
    bottom = next(place for place in found.stretches if place.walls == (WallRef(0, 0),))
    # From (x, 0) the far corners are at hypot(x, 4) and hypot(6 - x, 4).
    half = sqrt(5.2**2 - 4**2)
    assert bottom.ends == pytest.approx(np.array([[6 - half, 0], [half, 0]]))


def test_the_reach_cuts_a_ceiling_zone_to_arcs():
    found = answer(room(RECTANGLE), replace(DOME, farthest=4.0))
    area = sum(shapely.Polygon(piece.outline).area for piece in found.area.pieces)
    lens = shapely.Polygon(RECTANGLE)
    for corner in RECTANGLE:
        lens = lens.intersection(shapely.Point(corner).buffer(4.0, quad_segs=2000))
    assert area == pytest.approx(lens.area, abs=1e-4 * 3.5)  # 0.1 mm along its 3.5 m of border
    assert area <= lens.area
    assert found.spots[0].point == pytest.approx([3, 2], abs=1e-6)


def test_a_reach_that_is_too_short_is_named():
    found = answer(room(RECTANGLE), replace(DOME, farthest=3.0))
    assert found.obstruction == "reach"
    assert found.partial[0].aim.floor < 1


@pytest.mark.parametrize(
    ("change", "blame"),
    [
        ({"grazing": radians(60)}, "grazing"),
        ({"clearances": Clearances(walls=2.5)}, "distance"),
        ({"horizontal_field": pi}, "field"),
        ({"horizontal_field": pi, "farthest": 1.0}, "several"),
    ],
)
def test_the_limit_to_blame(change, blame):
    assert answer(room(RECTANGLE), replace(DOME, **change)).obstruction == blame


def test_openings_and_their_clearance():
    door = Opening(WallRef(0, 0), "door", 1.0, (2 / 6, 3 / 6))
    device = replace(WALL_SENSOR, clearances=Clearances(openings=0.5))
    found = answer(room(RECTANGLE, [door]), device)
    bottom = [place.ends[:, 0].tolist() for place in found.stretches if place.walls == (WallRef(0, 0),)]
    assert bottom == [pytest.approx([0, 1.5]), pytest.approx([3.5, 6])]
    whole = answer(
        room(RECTANGLE, [replace(door, span=(0.0, 1.0))]), replace(device, clearances=Clearances())
    )
    assert all(place.walls != (WallRef(0, 0),) for place in whole.stretches)


def test_a_corner_needs_two_solid_walls():
    beside = Opening(WallRef(0, 0), "door", 1.0, (0.0, 1 / 6))
    assert len(answer(room(RECTANGLE, [beside]), CORNER_CAMERA).corners) == 3


def test_an_empty_kernel_is_nobodys_fault():
    found = answer(room(U_ROOM), DOME)
    assert (found.obstruction, found.covers, found.partial) == ("sight", False, ())


def test_fixings_in_the_devices_order():
    device = Device("any", "camera", ("wall", "corner", "ceiling"), 2 * pi)
    assert [spot.fixing for spot in answer(room(L_ROOM), device).spots] == ["wall", "corner", "ceiling"]


def test_near_a_wanted_spot():
    spot = only_spot(
        room(RECTANGLE), replace(DOME, clearances=Clearances(walls=0.5)), near=np.array([0.0, 0.0])
    )
    assert spot.point == pytest.approx([0.5, 0.5], abs=1e-6)
    spot = only_spot(room(RECTANGLE), WALL_SENSOR, near=np.array([4.02, -1.0]))
    assert spot.point == pytest.approx([4.0, 0.0])


def test_reach_by_density_and_by_section():
    """1920 px over 90 degrees give 192 px/m at 5 m (published-style worked figure, derived from the pinhole)."""
    camera = Device("c", "camera", ("corner",), radians(90), pixels_across=1920, density=192.0)
    assert device_limits(camera).reach == pytest.approx(5.0)
    assert device_limits(camera).reach_limit == "density"
    # h = 3 m, tilt 30 and field 50 degrees: the floor from 2.1006 m to 34.290 m (derived).
    tilted = replace(DOME, vertical_field=radians(50), tilt=radians(30), height=3.0, target_height=0.0)
    assert device_limits(tilted).distance == pytest.approx(2.1006, abs=1e-4)
    assert device_limits(tilted).reach == pytest.approx(34.290, abs=1e-3)
    # A target level with the lens is out of a field that ends below the horizon.
    assert device_limits(replace(tilted, target_height=3.0)).reach == -inf


@pytest.mark.parametrize("seed", range(80))
def test_setting_out_walks_back_to_the_point(seed):
    rng = np.random.default_rng(seed)
    of = device_trials.random_room(rng)
    low, high = of.outline.min(axis=0), of.outline.max(axis=0)
    polygon = shapely.Polygon(of.outline)
    for point in rng.uniform(low, high, (30, 2)):
        if polygon.contains(shapely.Point(point)):
            assert point_from(of, setting_out(of, point)) == pytest.approx(point, abs=1e-3)


def test_setting_out_is_right_angled_where_the_room_allows():
    plan = setting_out(room(L_ROOM), np.array([1.5, 2.0]))
    assert {offset.wall.edge for offset in plan.offsets} == {0, 5}
    assert sorted(offset.distance for offset in plan.offsets) == [1.5, 2.0]


def test_setting_out_from_corners_where_no_faces_serve():
    needle = room([(0, 0), (0.2, 0), (0.25, 3), (0.2, 6), (0, 6), (-0.05, 3)])
    plan = setting_out(needle, np.array([0.1, 5.999]))
    assert point_from(needle, plan) == pytest.approx([0.1, 5.999], abs=1e-3)


@pytest.mark.parametrize("seed", range(40))
def test_spots_on_the_grid_are_on_it_and_allowed(seed):
    rng = np.random.default_rng([9, seed])
    of, device = device_trials.random_room(rng), device_trials.random_device(rng)
    for spot in answer(of, device, step=0.05).spots:
        assert point_from(of, spot.setting_out) == pytest.approx(spot.point, abs=1e-3)
        if spot.on_grid:
            for offset in spot.setting_out.offsets:
                if offset.wall not in spot.walls:
                    assert offset.distance / 0.05 == pytest.approx(round(offset.distance / 0.05), abs=1e-6)


@pytest.mark.parametrize("seed", range(60))
def test_what_an_aim_sees_against_polygon_overlay(seed):
    rng = np.random.default_rng([3, seed])
    of = device_trials.random_room(rng)
    eye = np.array(shapely.Polygon(of.outline).representative_point().coords[0])
    field, bearing = rng.uniform(0.3, 6.2), rng.uniform(-pi, pi)
    reach = float(rng.choice([inf, rng.uniform(0.5, 6)]))
    arc = np.linspace(bearing - field / 2, bearing + field / 2, 20_000)
    rim = eye + min(reach, 100) * np.column_stack([np.cos(arc), np.sin(arc)])
    sector = shapely.Polygon([eye, *rim]).buffer(0)
    seen = seen_from(of, eye, bearing, field, reach)
    region = shapely.Polygon(visible_from(of.rings, eye))
    assert seen.floor == pytest.approx(region.intersection(sector).area / of.area, abs=1e-6)
    walls = shapely.LinearRing(of.outline)
    along = walls.intersection(region.boundary.intersection(sector.buffer(1e-9)).buffer(1e-7))
    assert seen.wall == pytest.approx(along.length / walls.length, abs=1e-4)


@pytest.mark.parametrize("seed", range(20))
def test_no_tried_aim_sees_more_floor(seed):
    rng = np.random.default_rng([4, seed])
    of = device_trials.random_room(rng)
    eye = np.array(shapely.Polygon(of.outline).representative_point().coords[0])
    best = best_aim(of, eye, 1.3)
    tried = [seen_from(of, eye, bearing, 1.3).floor for bearing in np.linspace(-pi, pi, 97)]
    assert max(tried) <= best.floor + 5e-3


def test_all_round_sees_all_from_the_kernel():
    aim = best_aim(room(L_ROOM), np.array([1.0, 1.0]), 2 * pi)
    assert (aim.floor, aim.wall) == (pytest.approx(1), pytest.approx(1))


def test_alternatives_are_ranked_and_elsewhere():
    found = answer(room(RECTANGLE), replace(WALL_SENSOR, fixings=("wall", "corner")))
    assert len(found.alternatives) == 3
    tolerances = [spot.tolerance for spot in found.alternatives]
    assert tolerances == sorted(tolerances, reverse=True)
    assert not {spot.walls for spot in found.alternatives} & {spot.walls for spot in found.spots}
    assert answer(room(L_ROOM), CORNER_CAMERA).alternatives == ()
