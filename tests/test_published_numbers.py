"""Figures from outside the project: each carries its source, and how well it is known, beside it.

"Seen" means read on two or more independent public pages, "one page" on one, "derived" worked out from the formula that
is named, "from memory" remembered and not confirmed. Figures of standards are to be checked against a bought copy.
"""

from math import degrees, inf, pi, radians

import pytest

from kernelscan.plan import Device
from kernelscan.plan.optics import field_of_view, seen_of_plane
from kernelscan.plan.pixel_levels import PIXEL_LEVELS, density_of_level
from kernelscan.reading import read_devices
from kernelscan.units import HEADER_UNITS


def camera(field, pixels, density=None):
    return Device("C", "camera", ("corner",), field, pixels_across=pixels, density=density)


@pytest.mark.parametrize(
    ("level", "density"),
    [
        # Source: IEC 62676-4:2014; seen.
        ("IEC 62676-4:2014 monitor", 12.5),
        ("IEC 62676-4:2014 detect", 25),
        ("IEC 62676-4:2014 observe", 62.5),
        ("IEC 62676-4:2014 recognise", 125),
        ("IEC 62676-4:2014 identify", 250),
        ("IEC 62676-4:2014 inspect", 1000),
        # Source: IEC 62676-4:2025; the numbers on one page, the names not confirmed and so not used.
        ("IEC 62676-4:2025 20", 20),
        ("IEC 62676-4:2025 40", 40),
        ("IEC 62676-4:2025 80", 80),
        ("IEC 62676-4:2025 125", 125),
        ("IEC 62676-4:2025 250", 250),
        ("IEC 62676-4:2025 500", 500),
        ("IEC 62676-4:2025 1500", 1500),
    ],
)
def test_densities_of_both_editions(level, density):
    assert density_of_level(level) == density


def test_no_level_stands_in_the_table_unchecked():
    assert sum(len(levels) for levels in PIXEL_LEVELS.values()) == 13


def test_1920_pixels_over_90_degrees_at_5_metres():
    # Source: N / (2 d tan(HFOV / 2)); derived.
    density = camera(pi / 2, 1920).density_at(5)
    assert density == pytest.approx(192.0, abs=1e-9)
    assert (
        density_of_level("IEC 62676-4:2014 recognise")
        < density
        < density_of_level("IEC 62676-4:2014 identify")
    )


def test_the_field_of_a_sensor_behind_a_lens():
    # Source: HFOV = 2 atan(w / 2f); seen. The sensor and the lens are an example, common practice.
    assert degrees(field_of_view(5.568, 2.8)) == pytest.approx(89.672, abs=5e-4)


@pytest.mark.parametrize(("density", "distance"), [(250, 3.862), (125, 7.724), (25, 38.621)])
def test_how_far_a_density_reaches(density, distance):
    # Source: d = N f / (w density) with N = 1920, w = 5.568 mm, f = 2.8 mm; derived.
    seeing = camera(field_of_view(5.568, 2.8), 1920, density)
    assert seeing.density_range == pytest.approx(distance, abs=5e-4)


@pytest.mark.parametrize(
    ("height", "tilt", "field", "near", "far"),
    # Source: h / tan(tilt + VFOV / 2) and h / tan(tilt - VFOV / 2), unbounded where tilt <= VFOV / 2; derived.
    [(3, 30, 50, 2.1006, 34.290), (2.4, 20, 50, 2.400, inf)],
)
def test_the_floor_edges_under_a_tilted_device(height, tilt, field, near, far):
    edges = seen_of_plane(height, radians(tilt), radians(field))
    assert edges[0] == pytest.approx(near, abs=5e-5)
    assert edges[1] == pytest.approx(far, abs=5e-4)


def test_the_same_figures_from_a_device_file(tmp_path):
    """Through the file, in the units that people write."""
    (tmp_path / "devices.toml").write_text(
        """
        [[device]]
        name = "By the lens"
        kind = "camera"
        fixed_to = ["corner"]
        sensor_width_mm = 5.568
        focal_length_mm = 2.8
        pixels_across = 1920
        density_level = "IEC 62676-4:2014 identify"
        [[device]]
        name = "Tilted"
        kind = "camera"
        fixed_to = ["wall"]
        horizontal_field_deg = 90
        vertical_field_deg = 50
        tilt_deg = 30
        height_m = 3
        pixels_across = 1920
        """,
        encoding="utf-8",
    )
    lens, tilted = read_devices(tmp_path / "devices.toml")
    assert lens.density_range == pytest.approx(3.862, abs=5e-4)
    assert tilted.floor_seen == pytest.approx((2.1006, 34.290), abs=5e-4)
    assert tilted.density_at(5) == pytest.approx(192.0, abs=1e-9)


def test_the_foot_and_the_inch():
    # Source: the international yard and pound agreement of 1959, 1 in = 25.4 mm exactly; from memory.
    assert HEADER_UNITS[1].metres == 0.0254
    assert HEADER_UNITS[2].metres == 0.3048
