"""The schedule of devices: for each room a row for each device, where it is fixed and how it is set out, or why not."""

from collections.abc import Iterator, Sequence
from math import degrees

from kernelscan.coverage.device_spots import DeviceAnswer, DeviceSpot, cheapest
from kernelscan.coverage.device_words import aim_in_words, set_out_in_words, shortfall_in_words
from kernelscan.coverage.wording import Custom
from kernelscan.markup.room_schedule import remarks
from kernelscan.markup.schedule import Entry, Form, Row, Schedule, measured
from kernelscan.markup.shown import ShownRoom, device_tag
from kernelscan.markup.style import BODY, MARKS
from kernelscan.markup.text import clean_text, wrapped
from kernelscan.markup.titleblock import TITLE_WIDTH

__all__ = ["device_schedule"]

ROOM_WIDTH = 26.0
NOTES = (
    "x and y are counted from the drawing's own origin. Aim: of the middle of the field, counter-clockwise from +x, "
    "and by how much it may be missed. Range: to the farthest corner; density: there. Off by: beyond the placing "
    "error that the device file allows for. North is +y."
)


def device_schedule(rooms: Sequence[ShownRoom], custom: Custom) -> Schedule:
    """Return the schedule by room and device, each at the first of its fixings that covers the room."""
    form = Form(
        "Schedule of devices",
        NOTES,
        (
            ("Room", "", "start"), ("Device", "", "start"), ("Fixed to", "", "start"),
            ("x", custom.length_unit, "end"), ("y", custom.length_unit, "end"), ("Aim", "", "start"),
            ("Tilt", "", "end"), ("Height", custom.length_unit, "end"), ("Range", custom.length_unit, "end"),
            ("Density", "px/m", "end"), ("Off by", custom.tolerance_unit, "end"),
        ),
        name=0,
        name_width=ROOM_WIDTH,
        remark=2,
        least=TITLE_WIDTH - 2.0,
    )  # fmt: skip
    return measured(form, [_entry(room, custom) for room in rooms])


def _entry(shown: ShownRoom, custom: Custom) -> Entry:
    name = wrapped(clean_text(shown.room.name), ROOM_WIDTH, BODY, most=3)
    area = f"{custom.area(shown.room.area)} {custom.area_unit}"
    best = cheapest(shown.answer.devices)
    rows = [
        row
        for index, answer in enumerate(shown.answer.devices)
        for row in _rows(
            shown.room.id if index == 0 else "", device_tag(index), answer, answer is best, custom
        )
    ]
    return Entry(("", *name, area), (*rows, *(Row((), remark) for remark in remarks(shown, custom))))


def _rows(room: str, tag: str, answer: DeviceAnswer, is_cheapest: bool, custom: Custom) -> Iterator[Row]:
    name = clean_text(answer.device.name)
    if not answer.spots:
        yield Row((room, tag), f"{name}: {shortfall_in_words(answer)}{_partial_place(answer, custom)}")
        return
    spot = answer.spots[0]
    yield Row((room, tag, MARKS[spot.fixing].word, *_cells(answer, spot, custom)))
    name += " (cheapest)" if is_cheapest else ""
    yield Row((), f"{name}: {set_out_in_words(answer.room, spot.setting_out, custom)}")


def _partial_place(answer: DeviceAnswer, custom: Custom) -> str:
    """Return where the best partial point is, and the aim from there."""
    if not answer.partial:
        return ""
    best = answer.partial[0]
    x, y = (custom.position(float(value)) for value in best.point)
    return f" (x {x}, y {y}, aim {degrees(best.aim.bearing) % 360:.0f}°)"


def _cells(answer: DeviceAnswer, spot: DeviceSpot, custom: Custom) -> tuple[str, ...]:
    device = answer.device
    tilted = device.vertical_field is not None or device.tilt != 0
    return (
        custom.position(float(spot.point[0])),
        custom.position(float(spot.point[1])),
        aim_in_words(spot),
        f"{degrees(device.tilt):.0f}°" if tilted else "",
        "" if device.height is None else custom.position(device.height).rstrip("0").rstrip("."),
        custom.range_up(spot.farthest),
        "" if spot.density is None else f"{int(spot.density + 1e-9)}",
        custom.tolerance_down(spot.tolerance),
    )
