"""What is said of a device in a room: why it does not cover it, where it points, and how its point is set out."""

from math import degrees

from kernelscan.coverage.device_spots import DeviceAnswer, DeviceSpot
from kernelscan.coverage.setting_out import Offset, SettingOut
from kernelscan.coverage.wall_names import face_name
from kernelscan.coverage.wording import Custom
from kernelscan.plan import Room, WallRef

__all__ = ["OBSTRUCTIONS", "aim_in_words", "set_out_in_words", "shortfall_in_words"]

OBSTRUCTIONS = {
    "sight": "no point sees every wall",
    "field": "its field is too narrow",
    "reach": "it does not reach far enough",
    "distance": "it would be too near a wall",
    "grazing": "it would see a wall at too small an angle",
    "clearance": "it would be too near an opening or a fixture",
    "several": "more than one of its limits stands in the way",
}
"""Why a device does not cover a room, as a person says it."""

ON_FACE = 5e-4
"""Metres: a point nearer to a face than this is on it."""


def aim_in_words(spot: DeviceSpot) -> str:
    """Return where the middle of the field points, counter-clockwise from +x, and by how much that may be missed."""
    if spot.bearing is None or spot.bearing_slack is None:
        return "all round"
    return f"{degrees(spot.bearing) % 360:.0f}° ±{int(degrees(spot.bearing_slack))}°"


def shortfall_in_words(answer: DeviceAnswer) -> str:
    """Return why a device does not cover a room, and what it sees at best of the places tried."""
    reason = OBSTRUCTIONS[answer.obstruction or "several"]
    if not answer.partial:
        return reason
    best = answer.partial[0]
    return (
        f"{reason}; {100 * best.aim.floor:.0f} % of the floor and {100 * best.aim.wall:.0f} % of the walls "
        f"from the best {best.fixing} tried"
    )


def set_out_in_words(room: Room, plan: SettingOut, custom: Custom) -> str:
    """Return the two setting-out distances, from named faces or from the corners where named walls begin."""
    return ", ".join(_offset_in_words(room, plan, offset, custom) for offset in plan.offsets)


def _offset_in_words(room: Room, plan: SettingOut, offset: Offset, custom: Custom) -> str:
    face = face_name(room, offset.wall, custom)
    if plan.by == "corners":
        before = WallRef(0, (offset.wall.edge - 1) % len(room.outline))
        corner = f"the corner of {face_name(room, before, custom)} and {face}"
        return f"{_tape(offset.distance, custom)} from {corner}"
    return f"{_tape(offset.distance, custom)} from {face}" if offset.distance > ON_FACE else f"on {face}"


def _tape(metres: float, custom: Custom) -> str:
    """A distance as it is read off a tape: millimetres, or feet and inches."""
    return custom.length(metres) if custom.imperial else f"{metres * 1000:.0f} mm"
