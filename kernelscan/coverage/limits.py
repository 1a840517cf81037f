"""The limits of a device, as they bear on where it may be mounted in plan.

From a lens at L, well aimed, a device covers a room when

* L lies on the inner side of every wall and sees none at less than the grazing angle;
* no corner of the room is farther from L than the device reaches: its farthest range, the range up to which it has
  the density wanted, and the range up to which its vertical field holds the target's height, whichever is least;
* no wall is nearer to L than the device works, or than its clearance;
* the field that the place asks for is no more than the device has: a full turn under a ceiling or on a stand, a
  straight angle on a wall, the interior angle in a corner.

The walls it is fixed to, and what lies no deeper than the lens stands off from them, are left out: they are seen along.
All this must hold wherever within the placing error L ends up.

Density is taken at the distance of the farthest corner; the depth that the pinhole's formula asks for is never more
than that, so the true density there is never less. The vertical field is taken on the axis.
"""

from dataclasses import dataclass
from math import inf
from typing import Literal

from kernelscan.plan import Device

__all__ = ["Limits", "ReachLimit", "device_limits"]

ReachLimit = Literal["range", "density", "vertical field", "none"]


@dataclass(frozen=True, slots=True)
class Limits:
    """What a device asks of a mounting point; lengths in metres, angles in radians.

    Attributes
    ----------
    reach
        The farthest corner may be at most this far from the lens; below 0 where no place will do.
    reach_limit
        Which limit sets the reach.
    distance
        Every wall it is not fixed to is at least this far.
    grazing, placing_error
        The least angle at which a wall is seen, wherever within the placing error the lens ends up.
    field
        The horizontal field.
    stand_off
        From the surface to the lens.
    from_openings, from_fixtures
        From the point of fixing to every door, window and gap, and to the fixtures whose names fit a pattern.
    """

    reach: float
    reach_limit: ReachLimit
    distance: float
    grazing: float
    placing_error: float
    field: float
    stand_off: float
    from_openings: float
    from_fixtures: tuple[tuple[str, float], ...]


def device_limits(device: Device) -> Limits:
    """Return the limits of a device, the placing error allowed for."""
    near, far = device.target_seen
    reaches: list[tuple[float, ReachLimit]] = [
        (device.farthest, "range"),
        (device.density_range, "density"),
        (far, "vertical field"),
    ]
    reach, reach_limit = min(reaches, key=lambda each: each[0])
    error = device.placing_error
    return Limits(
        reach=reach - error,
        reach_limit="none" if reach == inf else reach_limit,
        distance=max(device.nearest, near, device.clearances.walls) + error,
        grazing=device.grazing,
        placing_error=error,
        field=device.horizontal_field,
        stand_off=device.stand_off,
        from_openings=_clear(device.clearances.openings, error),
        from_fixtures=tuple((name, _clear(off, error)) for name, off in device.clearances.obstacles),
    )


def _clear(distance: float, error: float) -> float:
    """A clearance with the placing error added; no clearance asked for is none."""
    return distance + error if distance > 0 else 0.0
