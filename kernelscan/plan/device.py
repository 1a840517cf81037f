"""A device that somebody wants to fit: what it can see, where it may be fixed, and what is asked of it."""

from dataclasses import dataclass
from math import inf, pi, tan
from typing import Literal

from kernelscan.plan.optics import Projection, seen_of_plane

__all__ = ["Clearances", "Device", "Fixing", "Projection"]

Fixing = Literal["ceiling", "wall", "corner", "floor"]
"""What a device is fixed to; ``floor`` is a stand."""


@dataclass(frozen=True, slots=True)
class Clearances:
    """How far a device must stay from things, in metres; the walls it is fixed to do not count."""

    walls: float = 0.0
    openings: float = 0.0
    obstacles: tuple[tuple[str, float], ...] = ()
    """Pairs of a name pattern and a distance: from every fixture of the plan whose name fits."""


@dataclass(frozen=True, slots=True)
class Device:
    """One type of device; lengths in metres, angles in radians, densities in pixels a metre.

    Attributes
    ----------
    name, kind
        What people call it, and what it is: ``camera``, ``motion`` or any other word.
    fixings
        Where it may be fixed, in the order of preference.
    horizontal_field
        The angle it sees in plan, above 0 and at most 2 pi.
    vertical_field, tilt
        The angle it sees in section, and how far its axis points below the horizon; ``None`` where it is no limit.
    height, target_height
        Of the lens and of what must be in view of the walls, above the floor; without the latter nothing is asked of
        the vertical field.
    nearest, farthest
        Between these distances it works.
    pixels_across, density, projection
        Pixels over the horizontal field, the pixels a metre wanted at the farthest wall, and how the lens spreads
        them.
    grazing
        The least angle at which a wall must be seen, the walls it is fixed to left out.
    stand_off
        How far the lens is in front of the surface that the device is fixed to.
    clearances
        How far it must stay from walls, openings and fixtures.
    placing_error
        How far off the point it may end up.
    cost
        For comparing, in any currency; ``None`` if the file gives none.
    """

    name: str
    kind: str
    fixings: tuple[Fixing, ...]
    horizontal_field: float
    vertical_field: float | None = None
    tilt: float = 0.0
    height: float | None = None
    target_height: float | None = None
    nearest: float = 0.0
    farthest: float = inf
    pixels_across: int | None = None
    density: float | None = None
    projection: Projection = "pinhole"
    grazing: float = 0.0
    stand_off: float = 0.0
    clearances: Clearances = Clearances()
    placing_error: float = 0.0
    cost: float | None = None

    def density_at(self, distance: float) -> float | None:
        """Return the pixels a metre on a target facing the lens at that distance, in metres; ``None`` without pixels.

        By the pinhole, N / (2 d tan(HFOV / 2)) with d measured along the axis; over equal angles, N / (HFOV d).
        """
        if self.pixels_across is None:
            return None
        if distance <= 0:
            return inf
        return self.pixels_across / (distance * self._metres_across_at_one())

    @property
    def density_range(self) -> float:
        """The distance up to which the density is what is wanted: infinite where none is."""
        if self.density is None or self.pixels_across is None:
            return inf
        return self.pixels_across / (self.density * self._metres_across_at_one())

    def _metres_across_at_one(self) -> float:
        """The width that the field takes in at one metre."""
        return (
            self.horizontal_field if self.projection == "equidistant" else 2 * tan(self.horizontal_field / 2)
        )

    @property
    def floor_seen(self) -> tuple[float, float]:
        """From which to which distance it sees the floor, on its axis; everywhere where no vertical field is known."""
        return self._seen_at(0.0)

    @property
    def target_seen(self) -> tuple[float, float]:
        """From which to which distance it sees what is at the target's height; ``optics.NOTHING`` if it never does."""
        return (0.0, inf) if self.target_height is None else self._seen_at(self.target_height)

    def _seen_at(self, height: float) -> tuple[float, float]:
        if self.vertical_field is None or self.height is None:
            return 0.0, inf
        return seen_of_plane(self.height - height, self.tilt, self.vertical_field)

    @property
    def sees_all_round(self) -> bool:
        """Whether its field closes in plan, as a ceiling or a stand needs to see a whole room."""
        return self.horizontal_field >= 2 * pi
