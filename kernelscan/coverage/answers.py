"""Everything that is said of one room, put together: what the command line prints, writes and draws."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from kernelscan.coverage.device_answers import device_answer
from kernelscan.coverage.device_spots import DeviceAnswer
from kernelscan.coverage.features import Simplified, simplified
from kernelscan.coverage.hidden import Hidden, hidden_from
from kernelscan.coverage.mounting import room_zones
from kernelscan.coverage.reasons import Reasons, why_no_point
from kernelscan.coverage.zones import RoomZones
from kernelscan.geometry.certificate import verify_kernel
from kernelscan.geometry.nesting import side_of_ring
from kernelscan.plan import Device, Room
from kernelscan.tolerances import Tolerances

__all__ = ["RoomAnswer", "TolerantAnswer", "room_answer"]

Floats = npt.NDArray[np.float64]


@dataclass(frozen=True, slots=True, eq=False)
class TolerantAnswer:
    """The answer for a room without its small features, and what they hide.

    Attributes
    ----------
    simplified
        The room without them, and what was left out.
    zones
        Its kernel and zones.
    hidden
        What each recommended spot does not see of the exact room, in the order of ``zones.recommended``; ``None`` for
        a spot that lies on a feature which stands out into the room.
    """

    simplified: Simplified
    zones: RoomZones
    hidden: tuple[Hidden | None, ...]


@dataclass(frozen=True, slots=True, eq=False)
class RoomAnswer:
    """The answers for one room.

    Attributes
    ----------
    zones
        The exact answer.
    tolerant
        The answer without small features, side by side with it, if it was asked for.
    reasons
        Why no point sees every wall, if none does.
    devices
        What each device can do, in the file's order; without the small features if these were to be left out.
    """

    zones: RoomZones
    tolerant: TolerantAnswer | None = None
    reasons: Reasons | None = None
    devices: tuple[DeviceAnswer, ...] = ()

    @property
    def room(self) -> Room:
        """The exact room."""
        return self.zones.room


def room_answer(
    room: Room,
    devices: Sequence[Device] = (),
    *,
    ignore_depth: float = 0.0,
    near: Floats | None = None,
    tolerances: Tolerances = Tolerances(),
) -> RoomAnswer:
    """Return everything that is said of one room, each kernel passed by the exact checker.

    Parameters
    ----------
    devices
        The devices to be placed.
    ignore_depth
        Small features up to this depth in metres are left out for the tolerant answer; 0 for none.
    near
        A spot, ``(2,)``, to which devices are to be as near as their zones allow.

    Raises
    ------
    CertificateError
        If the checker refuses a kernel, which is a fault of the program.
    """
    zones = _checked_zones(room, tolerances)
    reasons = why_no_point(room, zones.kernel, tolerances) if zones.kernel.kind == "empty" else None
    tolerant = _tolerant(room, ignore_depth, tolerances) if ignore_depth > 0 else None
    basis = zones if tolerant is None else tolerant.zones
    found = tuple(
        device_answer(basis.room, basis.kernel, device, near=near, tolerances=tolerances)
        for device in devices
    )
    return RoomAnswer(zones, tolerant, reasons, found)


def _checked_zones(room: Room, tolerances: Tolerances) -> RoomZones:
    zones = room_zones(room, tolerances)
    verify_kernel(room.outline, zones.kernel, room.holes)
    return zones


def _tolerant(room: Room, depth: float, tolerances: Tolerances) -> TolerantAnswer:
    without = simplified(room, depth, tolerances)
    zones = _checked_zones(without.room, tolerances)
    hidden = tuple(_hidden(room, spot.point) for spot in zones.recommended)
    return TolerantAnswer(without, zones, hidden)


def _hidden(room: Room, point: Floats) -> Hidden | None:
    """What a spot does not see of the exact room; ``None`` where it is not in it."""
    eye = _within(room, point)
    return None if eye is None else hidden_from(room, eye)


def _within(room: Room, point: Floats) -> Floats | None:
    """The point itself, or one a micrometre off it, that is in the room: a point on a wall is rounded."""
    for nudge in ((0, 0), (1, 0), (-1, 0), (0, 1), (0, -1)):
        eye = point + 1e-6 * np.array(nudge)
        x, y = eye.tolist()
        in_a_hole = any(side_of_ring(hole, (x, y)) > 0 for hole in room.holes)
        if side_of_ring(room.outline, (x, y)) >= 0 and not in_a_hole:
            return np.asarray(eye)
    return None
