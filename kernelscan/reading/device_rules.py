"""The rules between the values of one device: what goes together, what excludes each other, what can never work.

A rule speaks only when the values that it speaks of are sound; its fault goes to the key that a person would change.
"""

from collections.abc import Mapping
from math import degrees, pi

from kernelscan.plan import Device, Projection
from kernelscan.plan.optics import NOTHING, field_of_view
from kernelscan.plan.pixel_levels import PIXEL_LEVELS, density_of_level
from kernelscan.reading.device_keys import (
    COST,
    DENSITY,
    FARTHEST,
    FOCAL_LENGTH,
    GRAZING,
    HEIGHT,
    HORIZONTAL_FIELD,
    NEAREST,
    PLACING_ERROR,
    SENSOR_HEIGHT,
    SENSOR_WIDTH,
    STAND_OFF,
    TARGET_HEIGHT,
    TILT,
    VERTICAL_FIELD,
    Quantity,
)
from kernelscan.reading.toml_table import Table, shown

__all__ = [
    "Values",
    "check_given_together",
    "check_picture",
    "check_reach",
    "density_wanted",
    "horizontal_field",
    "vertical_field",
]

Values = Mapping[Quantity, float | None]
"""What was read of each quantity; ``None`` if it is missing or wrong."""

NO_BEARING = {
    "name",
    "kind",
    "fixed_to",
    "clearance",
    *(key for quantity in (GRAZING, STAND_OFF, PLACING_ERROR, COST) for key in quantity.keys),
}
"""Keys whose faults do not change at which distances a device works."""


def horizontal_field(table: Table, values: Values, projection: Projection) -> float | None:
    """Return the horizontal field in radians, given as it is or by sensor and lens."""
    if not table.has_any(HORIZONTAL_FIELD, SENSOR_WIDTH):
        table.note("horizontal_field_deg", "missing; give it, or sensor_width_mm with focal_length_mm")
    return _field(table, values, (HORIZONTAL_FIELD, SENSOR_WIDTH), projection)


def vertical_field(table: Table, values: Values, projection: Projection) -> float | None:
    """Return the vertical field in radians, given as it is or by sensor and lens; ``None`` if it is not given."""
    return _field(table, values, (VERTICAL_FIELD, SENSOR_HEIGHT), projection)


def _field(
    table: Table, values: Values, given: tuple[Quantity, Quantity], projection: Projection
) -> float | None:
    direct, sensor = given
    direct_key, sensor_key = table.key_of(direct), table.key_of(sensor)
    if direct_key and sensor_key:
        table.note(sensor_key, f"given beside {direct_key}; keep one of them")
    width, focal_length = values[sensor], values[FOCAL_LENGTH]
    if direct_key or sensor_key is None or width is None or focal_length is None:
        return values[direct]
    field = field_of_view(width, focal_length, projection)
    if not direct.allows(degrees(field)):
        table.note(
            sensor_key,
            f"makes a field of {degrees(field):.1f} deg with focal_length_mm, expected "
            f"{direct.expected_in(direct.keys[0])}",
        )
    return field


def density_wanted(table: Table, values: Values) -> float | None:
    """Return the pixels a metre that are wanted, given as a number or as a level of an edition."""
    level, key = table.text("density_level", "IEC 62676-4:2014 identify"), table.key_of(DENSITY)
    if key and table.has("density_level"):
        table.note("density_level", f"given beside {key}; keep one of them")
    if level is None:
        return values[DENSITY]
    try:
        return density_of_level(level)
    except KeyError:
        editions = (f"{edition} {', '.join(levels)}" for edition, levels in PIXEL_LEVELS.items())
        table.note(
            "density_level", f"got {shown(level)}, expected an edition and a level: {'; '.join(editions)}"
        )
        return None


def check_given_together(table: Table) -> None:
    """Note what is missing beside something given, and what is given to no end."""
    for sensor in (SENSOR_WIDTH, SENSOR_HEIGHT):
        if (key := table.key_of(sensor)) and not table.has_any(FOCAL_LENGTH):
            table.note("focal_length_mm", f"missing; {key} says nothing without it")
    if table.has_any(FOCAL_LENGTH) and not table.has_any(SENSOR_WIDTH, SENSOR_HEIGHT):
        table.note("focal_length_mm", "says nothing without sensor_width_mm or sensor_height_mm")
    wanted = "density_level" if table.has("density_level") else table.key_of(DENSITY)
    if wanted and not table.has("pixels_across"):
        table.note("pixels_across", f"missing; {wanted} says nothing without it")
    field, height = table.has_any(VERTICAL_FIELD, SENSOR_HEIGHT), table.has_any(HEIGHT)
    if field and not height:
        table.note("height_m", "missing; what a vertical field sees depends on it")
    if (key := table.key_of(TARGET_HEIGHT)) and not (field and height):
        table.note(key, "says nothing without vertical_field_deg and height_m")


def check_picture(table: Table, device: Device) -> None:
    """Note a field that no pinhole can spread pixels over."""
    key = table.key_of(HORIZONTAL_FIELD) or table.key_of(SENSOR_WIDTH)
    if key is None or table.unsound & {key, "projection"} or not device.pixels_across:
        return
    if device.projection == "pinhole" and device.horizontal_field >= pi:
        table.note(
            key,
            f"got {degrees(device.horizontal_field):g} deg with pixels_across, expected under 180 deg, as a pinhole's "
            'picture is; if it is a fisheye, add projection = "equidistant"',
        )


def check_reach(table: Table, device: Device) -> None:
    """Note limits that leave no distance at which the device works."""
    if table.unsound - NO_BEARING:
        return
    in_section = table.key_of(TILT) or table.key_of(VERTICAL_FIELD) or table.key_of(SENSOR_HEIGHT) or ""
    if device.target_seen == NOTHING:
        table.note(
            in_section, "with this tilt and vertical field, nothing at target_height_m is ever in view"
        )
        return
    near, far = device.target_seen
    density_key = table.key_of(DENSITY) or "density_level"
    start, start_key = max((device.nearest, table.key_of(NEAREST) or ""), (near, in_section))
    end, end_key = min(
        (device.farthest, table.key_of(FARTHEST) or ""),
        (device.density_range, density_key),
        (far, in_section),
    )
    if start >= end:
        table.note(
            start_key,
            f"starts at {start:.2f} m, where {end_key} has ended at {end:.2f} m: no distance is left",
        )
