"""Answers about devices as values: where one covers a room, the spot to use, and what it falls short by."""

from collections.abc import Iterable
from dataclasses import dataclass
from typing import Literal

import numpy as np
import numpy.typing as npt

from kernelscan.coverage.aim import Aim
from kernelscan.coverage.device_zones import Place
from kernelscan.coverage.limits import Limits
from kernelscan.coverage.plan_zone import PlanZone
from kernelscan.coverage.setting_out import SettingOut
from kernelscan.plan import Device, Fixing, Room, WallRef

__all__ = ["DeviceAnswer", "DeviceSpot", "Obstruction", "PartialSpot", "cheapest"]

Floats = npt.NDArray[np.float64]

Obstruction = Literal["sight", "field", "reach", "distance", "grazing", "clearance", "several"]
"""What keeps a device from covering a room: no point sees every wall, or the one limit without which it would."""


@dataclass(frozen=True, slots=True, eq=False)
class DeviceSpot:
    """One point at which a device is to be fixed.

    Attributes
    ----------
    fixing, walls
        What it is fixed to; no walls under a ceiling or on a stand.
    point, lens
        ``(2,)`` metres: the point of fixing and the lens in front of it.
    bearing, bearing_slack
        Where to point the middle of the field, and by how much that may be missed either way; radians, ``None`` where
        the device sees all round.
    field
        The horizontal field that the place asks for.
    farthest, density
        Distance from the lens to the farthest corner, and pixels a metre there; ``None`` without pixels.
    floor_edges
        From which to which horizontal distance the floor is seen, on the axis; ``None`` without height or field.
    tolerance
        By how much the point may be missed beyond the placing error, in metres.
    binding
        The walls that limit it there.
    setting_out
        The two distances that fix the point.
    on_grid
        Whether these are multiples of the step asked for.
    """

    fixing: Fixing
    walls: tuple[WallRef, ...]
    point: Floats
    lens: Floats
    bearing: float | None
    bearing_slack: float | None
    field: float
    farthest: float
    density: float | None
    floor_edges: tuple[float, float] | None
    tolerance: float
    binding: tuple[WallRef, ...]
    setting_out: SettingOut
    on_grid: bool


@dataclass(frozen=True, slots=True, eq=False)
class PartialSpot:
    """The best that a device does from a place when its field is too narrow for the whole room.

    ``aim`` says where to point it and what fractions of floor and wall it then sees.
    """

    fixing: Fixing
    walls: tuple[WallRef, ...]
    point: Floats
    lens: Floats
    aim: Aim


@dataclass(frozen=True, slots=True, eq=False)
class DeviceAnswer:
    """What one device can do in one room.

    Attributes
    ----------
    area
        Where its lens may be under a ceiling or on a stand; ``None`` if nowhere.
    stretches, corners
        Where on the walls, and in which corners, it may be fixed.
    spots
        The best spot of each fixing that covers the whole room, in the device's order of preference.
    alternatives
        The best spots of other places, that which may be missed by most first.
    obstruction
        What keeps it from that when there is no spot.
    partial
        The best it does with its field from the places that would do otherwise, most floor first.
    """

    room: Room
    device: Device
    limits: Limits
    area: PlanZone | None
    stretches: tuple[Place, ...]
    corners: tuple[Place, ...]
    spots: tuple[DeviceSpot, ...]
    obstruction: Obstruction | None
    partial: tuple[PartialSpot, ...]
    alternatives: tuple[DeviceSpot, ...] = ()

    @property
    def covers(self) -> bool:
        """Whether the device covers the whole room from somewhere."""
        return bool(self.spots)


def cheapest(answers: Iterable[DeviceAnswer]) -> DeviceAnswer | None:
    """Return the answer of the cheapest device that covers the room, or ``None`` if none that has a cost does."""
    priced = [answer for answer in answers if answer.covers and answer.device.cost is not None]
    return min(priced, key=lambda answer: answer.device.cost or 0.0, default=None)
