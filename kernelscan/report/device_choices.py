"""Which devices cover which rooms from which mounts: room by room, device by device, in the terminal."""

from collections.abc import Sequence
from math import degrees
from typing import TextIO

from kernelscan.coverage import RoomAnswer
from kernelscan.coverage.device_spots import DeviceAnswer, DeviceSpot, cheapest
from kernelscan.coverage.setting_out import SettingOut
from kernelscan.coverage.sides import face_name
from kernelscan.coverage.wording import Custom
from kernelscan.plain_text import plain_text
from kernelscan.plan import Plan, Room
from kernelscan.report.terminal import cell, print_parts, table_of
from kernelscan.report.wording import drawn_coordinate, range_in_words, tolerance_in_words

__all__ = ["OBSTRUCTIONS", "print_device_choices", "set_out_in_words", "shortfall_in_words"]

OBSTRUCTIONS = {
    "sight": "no point sees every wall",
    "field": "its field is too narrow",
    "reach": "it does not reach far enough",
    "distance": "it would be too near a wall",
    "grazing": "it would see a wall at too small an angle",
    "clearance": "it would be too near an opening or a fixture",
    "several": "more than one of its limits",
}
"""Why a device does not cover a room, as a person says it."""


def print_device_choices(plan: Plan, answers: Sequence[RoomAnswer], out: TextIO) -> None:
    """Print for each room and device the spot that covers the room, or what the device falls short by."""
    if not any(answer.devices for answer in answers):
        return
    unit = plain_text(plan.unit.name)
    table = table_of(
        "room",
        "name",
        "device",
        "fixed to",
        f"x ({unit})",
        f"y ({unit})",
        "aim",
        "range",
        "off by",
        "set out, or why not",
    )
    for of_room in answers:
        best = cheapest(of_room.devices)
        for number, answer in enumerate(of_room.devices):
            head = [answer.room.id, cell(answer.room.name)] if number == 0 else ["", ""]
            name = plain_text(answer.device.name, 30) + (" (cheapest)" if answer is best else "")
            table.add_row(*head, cell(name), *_cells(plan, answer))
    print_parts(out, "Devices, each at the spot that may be missed by most:", table)


def _cells(plan: Plan, answer: DeviceAnswer) -> list[str]:
    if not answer.spots:
        return ["–"] * 6 + [shortfall_in_words(answer)]
    spot = answer.spots[0]
    return [
        spot.fixing,
        *(drawn_coordinate(plan, float(value)) for value in spot.point),
        _aim(spot),
        range_in_words(plan, spot.farthest),
        tolerance_in_words(plan, spot.tolerance),
        set_out_in_words(answer.room, spot.setting_out, Custom(plan.unit.imperial)),
    ]


def _aim(spot: DeviceSpot) -> str:
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
    return ", ".join(
        f"{_tape(offset.distance, custom)} from the "
        + ("" if plan.by == "faces" else "first corner of the ")
        + face_name(room, offset.wall, custom)
        for offset in plan.offsets
    )


def _tape(metres: float, custom: Custom) -> str:
    """A distance as it is read off a tape: millimetres, or feet and inches."""
    return custom.length(metres) if custom.imperial else f"{metres * 1000:.0f} mm"
