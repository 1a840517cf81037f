"""What a device sees: densities and their range, fields behind a lens, planes under a tilted device."""

from math import atan2, cos, hypot, inf, isclose, pi, radians, sin, tan

import pytest
from hypothesis import given
from hypothesis import strategies as st

from kernelscan.plan import Device
from kernelscan.plan.optics import NOTHING, field_of_view, seen_of_plane
from kernelscan.plan.pixel_levels import PIXEL_LEVELS, density_of_level

drops = st.floats(0.1, 50)
tilts = st.floats(-pi / 2, pi / 2)
vertical_fields = st.floats(radians(1), pi)
projections = st.sampled_from(["pinhole", "equidistant"])


def camera(**given):
    return Device(
        **{"name": "C", "kind": "camera", "fixings": ("corner",), "horizontal_field": pi / 2, **given}
    )


def test_a_density_at_a_distance():
    # tan 45 deg is 1, so that 1000 px lie over 2 m at 1 m, and over 8 m at 4 m.
    seeing = camera(pixels_across=1000)
    assert seeing.density_at(1) == pytest.approx(500, rel=1e-12)
    assert seeing.density_at(4) == pytest.approx(125, rel=1e-12)
    assert seeing.density_range == inf


def test_a_density_over_equal_angles():
    # 360 deg of a circle with radius 2 m are 4 pi m.
    seeing = camera(pixels_across=6000, horizontal_field=2 * pi, projection="equidistant")
    assert seeing.density_at(2) == pytest.approx(6000 / (4 * pi), rel=1e-12)


def test_without_pixels_there_is_no_density():
    assert camera().density_at(3) is None
    assert camera(density=100.0).density_range == inf


def test_at_the_lens_the_density_knows_no_bound():
    assert camera(pixels_across=1000).density_at(0) == inf


@given(st.integers(1, 20_000), st.floats(1, 2000), st.floats(radians(5), radians(175)), projections)
def test_the_density_at_its_range_is_what_is_wanted(pixels, density, field, projection):
    seeing = camera(pixels_across=pixels, density=density, horizontal_field=field, projection=projection)
    assert isclose(seeing.density_at(seeing.density_range), density, rel_tol=1e-9)
    assert (
        seeing.density_at(seeing.density_range * 1.01)
        < density
        < seeing.density_at(seeing.density_range * 0.99)
    )


@given(st.floats(0.5, 50), st.floats(0.5, 50))
def test_a_field_gives_its_sensor_back(sensor, focal_length):
    assert isclose(2 * focal_length * tan(field_of_view(sensor, focal_length) / 2), sensor, rel_tol=1e-9)
    assert isclose(focal_length * field_of_view(sensor, focal_length, "equidistant"), sensor, rel_tol=1e-12)


@given(st.integers(1, 9000), st.floats(1, 20), st.floats(1, 20), st.floats(0.1, 100))
def test_the_density_by_the_field_is_the_density_by_the_lens(pixels, sensor, focal_length, distance):
    """N / (2 d tan(HFOV / 2)) = N f / (w d)."""
    seeing = camera(pixels_across=pixels, horizontal_field=field_of_view(sensor, focal_length))
    assert isclose(seeing.density_at(distance), pixels * focal_length / (sensor * distance), rel_tol=1e-9)


@given(drops, tilts, vertical_fields, st.floats(0.001, 500))
def test_a_plane_is_seen_where_the_ray_to_it_is_in_the_field(drop, tilt, field, distance):
    """By the ray's own angle, not by the edges."""
    near, far = seen_of_plane(drop, tilt, field)
    off_axis = abs(atan2(drop, distance) - tilt)
    if abs(off_axis - field / 2) > 1e-6:
        assert (near < distance < far) == (off_axis < field / 2)


@given(drops, tilts, vertical_fields)
def test_a_plane_above_is_one_below_upside_down(drop, tilt, field):
    assert seen_of_plane(-drop, -tilt, field) == seen_of_plane(drop, tilt, field)


@given(drops, st.floats(radians(-80), radians(80)), vertical_fields, st.floats(0.1, 10))
def test_edges_grow_with_the_height(drop, tilt, field, factor):
    before, after = seen_of_plane(drop, tilt, field), seen_of_plane(factor * drop, tilt, field)
    assert after == pytest.approx([factor * edge for edge in before], rel=1e-9)


@pytest.mark.parametrize(
    ("drop", "tilt", "field", "edges"),
    [
        (3, 90, 90, (0, 3)),  # a cone straight down: as far to the side as it is high
        (3, 90, 180, (0, inf)),  # all that is below, out to the horizon
        (3, 45, 90, (0, inf)),  # from straight down to the horizon
        (3, 0, 90, (3, inf)),
        (3, -45, 90, NOTHING),  # its lowest ray is level
        (3, -60, 90, NOTHING),
        (0, 0, 60, (0, inf)),  # a plane at the lens is seen by the level ray alone
        (0, 30, 60, (0, inf)),
        (0, 31, 60, NOTHING),
    ],
)
def test_edges_at_right_angles_and_at_the_horizon(drop, tilt, field, edges):
    found = seen_of_plane(drop, radians(tilt), radians(field))
    # Straight down is a right angle but for the last digit.
    assert found == pytest.approx(edges, abs=1e-12)


def test_a_device_without_a_vertical_field_has_no_edges():
    assert camera(height=3.0).floor_seen == (0, inf)
    assert camera(vertical_field=1.0).floor_seen == (0, inf)


def test_the_target_is_seen_from_nearer_than_the_floor():
    seeing = camera(height=3.0, target_height=1.5, tilt=radians(30), vertical_field=radians(50))
    assert seeing.target_seen == pytest.approx([edge / 2 for edge in seeing.floor_seen], rel=1e-12)


def test_a_full_turn_in_degrees_is_a_full_turn():
    assert camera(horizontal_field=360 * (pi / 180)).sees_all_round
    assert not camera(horizontal_field=radians(359)).sees_all_round


@pytest.mark.parametrize("side", [0, 20, 45])
def test_the_near_edge_of_a_picture_is_a_straight_line_across_the_axis(side):
    """The ray through a point of the picture's lower edge, that far to the side, is traced to the floor."""
    height, tilt, vertical = 3.0, radians(30), radians(50)
    forward = cos(tilt) - tan(vertical / 2) * sin(tilt)
    down = sin(tilt) + tan(vertical / 2) * cos(tilt)
    near, _ = seen_of_plane(height, tilt, vertical)
    assert forward * height / down == pytest.approx(near, rel=1e-12)
    sideways = tan(radians(side)) * height / down
    bearing = atan2(sideways, forward * height / down)
    assert hypot(sideways, forward * height / down) == pytest.approx(near / cos(bearing), rel=1e-12)


def test_levels_are_named_with_their_edition():
    assert density_of_level("iec 62676-4:2014   IDENTIFY") == 250
    for wrong in (
        "identify",
        "IEC 62676-4:2014",
        "IEC 62676-4 identify",
        "IEC 62676-4:2025 identify",
        "",
        "250",
    ):
        with pytest.raises(KeyError):
            density_of_level(wrong)


def test_levels_rise_within_each_edition():
    for levels in PIXEL_LEVELS.values():
        assert list(levels.values()) == sorted(set(levels.values()))
