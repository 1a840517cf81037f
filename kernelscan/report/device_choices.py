"""Which devices cover which rooms from which mounts: room by room, device by device, in the terminal."""

from collections.abc import Sequence
from typing import TextIO

from kernelscan.coverage import RoomAnswer
from kernelscan.coverage.device_spots import DeviceAnswer, cheapest
from kernelscan.coverage.device_words import aim_in_words, set_out_in_words, shortfall_in_words
from kernelscan.coverage.wording import Custom
from kernelscan.plain_text import plain_text
from kernelscan.plan import Plan
from kernelscan.report.terminal import cell, print_parts, table_of
from kernelscan.report.wording import drawn_coordinate, range_in_words, tolerance_in_words

__all__ = ["print_device_choices"]


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
        "sight within",
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
        aim_in_words(spot),
        range_in_words(plan, spot.farthest),
        tolerance_in_words(plan, spot.tolerance),
        set_out_in_words(answer.room, spot.setting_out, Custom(plan.unit.imperial)),
    ]
