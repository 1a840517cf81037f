"""What a lens takes in: its field from the sensor behind it, and what a tilted device sees of a level plane.

Letters: ``w`` the sensor's width or height and ``f`` the focal length, both in millimetres; ``V`` the vertical field
and ``tilt`` how far its axis points below the horizon, both in radians; ``drop`` how far the plane lies below the
lens, in metres.

In section, through the axis, a device sees the rays that fall by ``tilt - V / 2`` to ``tilt + V / 2``. A ray that
falls by an angle ``a`` between 0 and a right angle meets the plane at the horizontal distance ``drop / tan(a)``; one
that does not fall never does, and one that falls straight down or backwards meets it under the lens. So the plane is
seen from ``drop / tan(tilt + V / 2)`` to ``drop / tan(tilt - V / 2)``, without a bound where ``tilt <= V / 2``. A plane
above the lens is the same upside down. The edges of a pinhole's picture are straight lines across the axis, so that
to the sides they are farther away by ``1 / cos`` of the bearing off the axis.

Source of all formulas: the right-angled triangle; derived.
"""

from math import atan, inf, pi, tan
from typing import Literal

__all__ = ["NOTHING", "Projection", "field_of_view", "seen_of_plane"]

Projection = Literal["pinhole", "equidistant"]
"""How a lens spreads its pixels: evenly over a plane, or evenly over the angle, as a fisheye does."""

NOTHING = (inf, -inf)
"""The distances of a plane that is out of sight everywhere: from beyond all of them to before all of them."""


def field_of_view(sensor: float, focal_length: float, projection: Projection = "pinhole") -> float:
    """Return the angle in radians that a sensor takes in across its width or height.

    By the pinhole ``2 atan(w / 2 f)``; over equal angles, where an image at the angle ``a`` lies ``f a`` off the axis,
    ``w / f``.

    Parameters
    ----------
    sensor, focal_length
        In millimetres, both above 0. The sensor's measured width or height: type designations in inches are not that.
    projection
        Of the lens.
    """
    if projection == "equidistant":
        return sensor / focal_length
    return 2 * atan(sensor / (2 * focal_length))


def seen_of_plane(drop: float, tilt: float, vertical_field: float) -> tuple[float, float]:
    """Return from which to which horizontal distance a device sees a level plane, on its axis, in metres.

    Parameters
    ----------
    drop
        How far the plane lies below the lens, in metres; below 0 for a plane above it.
    tilt
        Radians below the horizon, from -pi / 2 (straight up) to pi / 2 (straight down).
    vertical_field
        Radians, above 0 and at most pi.

    Returns
    -------
    tuple of float
        The near and the far edge; the far edge is ``inf`` where nothing bounds it. ``NOTHING`` when the plane is
        nowhere in sight.
    """
    if drop < 0:
        return seen_of_plane(-drop, -tilt, vertical_field)
    steepest, flattest = tilt + vertical_field / 2, tilt - vertical_field / 2
    if drop == 0:
        # Seen edge-on by the level ray, and by no other.
        return (0.0, inf) if flattest <= 0 <= steepest else NOTHING
    if steepest <= 0:
        return NOTHING
    return _distance(drop, steepest), _distance(drop, flattest)


def _distance(drop: float, angle: float) -> float:
    """Where a ray that falls by that angle meets the plane."""
    if angle <= 0:
        return inf
    return drop / tan(angle) if angle < pi / 2 else 0.0
